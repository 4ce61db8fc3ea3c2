import { describe, expect, test } from "vitest";
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { UnitError } from "../../lib/quantity/unit.ts";
import { simulate, type SimulateOptions } from "../../lib/simulation/simulate.ts";
import type { Trajectory } from "../../lib/simulation/trajectory.ts";

const METHODS = ["rosenbrock", "bdf"] as const;

/** What every result that did not finish must show, in each of its views. */
function expectUnfinished(run: Trajectory, reason: RegExp): void {
  expect(run.finished).toBe(false);
  expect(run.reason).toMatch(reason);
  expect(run.reason).toMatch(/^Cannot integrate past t = \S+ s: .*[^.]$/);
  expect(run.cautions).toEqual([
    { code: "unfinished", severity: "serious", message: run.reason },
  ]);
  expect(run.toString()).toMatch(/^UNFINISHED/);
  expect(run.toString()).toContain(run.reason);
  expect(JSON.stringify(run)).toContain('"unfinished"');
  for (const time of run.times) expect(time).toBeLessThanOrEqual(run.timeReached);
  for (const species of run.mechanism.species) {
    const concentrations = run.concentration(species);
    expect(concentrations.length).toBe(run.times.length);
    expect(concentrations.every(Number.isFinite)).toBe(true);
  }
}

/** Steps whose rate grows faster than what they make: at constant k, d[A]/dt = k [A]² is infinite at
 * 1/(k [A]₀), and k [A]³ at 1/(2 k [A]₀²); both by separating the variables. */
const BLOW_UPS: [string, number, number, number, (t: number) => number][] = [
  ["2 A -> 3 A", 1, 1, 1, (t) => 1 / (1 - t)],
  ["2 A -> 3 A", 5, 0.02, 10, (t) => 0.02 / (1 - t / 10)],
  ["2 A -> 3 A", 1, 1e-9, 1e9, (t) => 1e-9 / (1 - t / 1e9)],
  ["3 A -> 4 A", 1, 1, 0.5, (t) => 1 / Math.sqrt(1 - 2 * t)],
];

describe.each(METHODS)("%s", (method) => {
  test.each(BLOW_UPS)(
    "%s with k = %d from %d mol/L ends at %d s",
    (steps, k, start, end, exact) => {
      const times = [0.5 * end, 0.9 * end, 2 * end, 3 * end];
      const run = simulate(parseMechanism(steps), {
        rateConstants: { k1: k },
        initial: { A: start },
        times,
        method,
      });
      expectUnfinished(run, /\[A\] has grown to .* mol\/L; .* add the step that ends it/);
      expect(Math.abs(run.timeReached / end - 1)).toBeLessThan(1e-4);
      expect([...run.times]).toEqual(times.slice(0, 2));
      run.concentration("A").forEach((value, i) =>
        expect(Math.abs(value / exact(times[i]) - 1)).toBeLessThan(1e-4)
      );
    },
  );

  test("growth beyond the largest number ends, and names the species", () => {
    const run = simulate(parseMechanism("A -> 2 A"), {
      rateConstants: { k1: 1 },
      initial: { A: 1 },
      times: [1, 1000],
      method,
    });
    expectUnfinished(run, /\[A\] has grown to/);
    // exp(t) overflows at t = ln(1.8e308) = 709.78
    expect(run.timeReached).toBeGreaterThan(700);
    expect(run.timeReached).toBeLessThan(709.8);
    expect(run.concentration("A")[0]).toBeCloseTo(Math.E, 4);
  });

  test("maxSteps ends the run with the outputs reached so far", () => {
    const steps = parseMechanism("A <=> B");
    const options: SimulateOptions = {
      rateConstants: { k1: 1, "k-1": 0.1 },
      initial: { A: 1 },
      times: [1e-8, 0.5, 1, 2, 100],
      method,
    };
    const whole = simulate(steps, options);
    const maxSteps = Math.floor(whole.statistics.accepted / 2);
    const run = simulate(steps, { ...options, maxSteps });
    expectUnfinished(run, new RegExp(`: ${maxSteps} steps are used up; raise maxSteps`));
    expect(run.statistics.accepted).toBe(maxSteps);
    expect(run.times.length).toBeGreaterThan(0);
    expect(run.times.length).toBeLessThan(5);
    expect([...run.concentration("A")]).toEqual(
      [...whole.concentration("A").subarray(0, run.times.length)],
    );
  });

  test("a signal that is aborted already stops before the first step", () => {
    const run = simulate(parseMechanism("A -> B"), {
      rateConstants: { k1: 1 },
      initial: { A: 1 },
      times: [0, 1],
      signal: AbortSignal.abort(),
      method,
    });
    expectUnfinished(run, /aborted by the signal/);
    expect(run.statistics.accepted).toBe(0);
    expect([...run.times]).toEqual([0]);
  });

  test("a signal aborted on the way stops soon, with what was reached", () => {
    const stop = new AbortController();
    let stopped = 0;
    const run = simulate(parseMechanism("A <=> B"), {
      rateConstants: { k1: 1, "k-1": 1 },
      initial: { A: 1 },
      times: Array.from({ length: 400 }, (_, i) => i / 100),
      rtol: 1e-13,
      signal: stop.signal,
      progress: (time) => {
        if (time < 1) return;
        stopped ||= time;
        stop.abort();
      },
      method,
    });
    expectUnfinished(run, /aborted by the signal/);
    expect(stopped).toBeGreaterThanOrEqual(1);
    expect(run.timeReached).toBeLessThan(2);
    expect(run.times.length).toBeGreaterThan(90);
  });

  test("a finished run carries no caution", () => {
    const run = simulate(parseMechanism("A -> B"), {
      rateConstants: { k1: 1 },
      initial: { A: 1 },
      times: [0, 0, 1, 1],
      method,
    });
    expect([run.finished, run.cautions]).toEqual([true, []]);
    expect(run.toString()).not.toMatch(/UNFINISHED/);
    const [a0, a1, b0, b1] = run.concentration("A");
    expect([a0, b0]).toEqual([a1, b1]);
  });
});

const GOOD: SimulateOptions = { rateConstants: { k1: 1 }, initial: { A: 1 }, times: [1] };

/** Options that cannot be used; the message names the value, the place, and what to do. */
const REFUSED: [string, string, object, new (...given: never[]) => Error, RegExp][] = [
  [
    "a species that is not there",
    "A -> oxide",
    { initial: { Oxide: 1 } },
    TypeError,
    /species "Oxide": .* did you mean "oxide"\? \(there are: "A", "oxide"\)/,
  ],
  [
    "a name that every object has",
    "A -> B",
    { initial: { toString: 1 } },
    TypeError,
    /species "toString"/,
  ],
  [
    "a rate constant left out",
    "A -> B\nB ->[k_2] C",
    {},
    TypeError,
    /without the rate constants "k_2": add them/,
  ],
  ["rate constants left out", "A -> B\nB -> C", { rateConstants: {} }, TypeError, /"k1", "k2"/],
  ["a reverse constant left out", "A <=> B", {}, TypeError, /"k-1"/],
  [
    "a constant no step has",
    "A -> B",
    { rateConstants: { k1: 1, k9: 1 } },
    TypeError,
    /rate constant "k9": .* did you mean "k1"\?/,
  ],
  ["a negative constant", "A -> B", { rateConstants: { k1: -2 } }, RangeError, /-2 .*"k1"/],
  ["an option that does not exist", "A -> B", { rTol: 1e-6 }, TypeError, /did you mean "rtol"\?/],
  ["a tolerance above 0.1", "A -> B", { rtol: 1 }, RangeError, /1 as option "rtol"/],
  ["a tolerance as text", "A -> B", { rtol: "1e-6" }, TypeError, /"1e-6" as option "rtol"/],
  ["no absolute tolerance", "A -> B", { atol: 0 }, RangeError, /0 as option "atol"/],
  ["a tolerance of no species", "A -> B", { atol: { Q: 1 } }, TypeError, /"Q"/],
  [
    "a method of another name",
    "A -> B",
    { method: "stiff" },
    RangeError,
    /"stiff" .* "rosenbrock", "bdf"/,
  ],
  ["no steps", "A -> B", { maxSteps: 0 }, RangeError, /0 as option "maxSteps"/],
  ["half a step", "A -> B", { maxSteps: 1.5 }, TypeError, /1\.5 as option "maxSteps"/],
  ["a signal of another kind", "A -> B", { signal: {} }, TypeError, /AbortSignal/],
  [
    "times that run backwards",
    "A -> B",
    { times: [2, 1] },
    RangeError,
    /1 s as output time 2: expected 2 s or later/,
  ],
  [
    "times before the start",
    "A -> B",
    { times: [1], startTime: 2 },
    RangeError,
    /1 s as output time 1: expected 2 s or later/,
  ],
  [
    "times in text that run backwards",
    "A -> B",
    { times: ["2 min", "90 s"] },
    RangeError,
    /90 s as output time 2: expected 120 s or later/,
  ],
  ["a time that is no number", "A -> B", { times: [NaN] }, TypeError, /NaN/],
  ["a time without end", "A -> B", { times: [Infinity] }, TypeError, /Infinity/],
  ["a time in kilograms", "A -> B", { times: ["1 kg"] }, UnitError, /"1 kg"/],
  ["no times", "A -> B", { times: [] }, TypeError, /add times, in s/],
  ["a negative concentration", "A -> B", { initial: { A: -1 } }, RangeError, /-1 .*"A"/],
  [
    "M without its concentration",
    "A + M -> B + M",
    {},
    TypeError,
    /third body M without its concentration: add M to initial/,
  ],
];

describe("what cannot be used is refused, with the value and the way out", () => {
  test.each(REFUSED)("%s", (_name, steps, change, kind, message) => {
    const call = () => simulate(parseMechanism(steps), { ...GOOD, ...change } as SimulateOptions);
    expect(call).toThrow(kind);
    expect(call).toThrow(message);
    expect(call).toThrow(/^Cannot .*[^.]$/);
  });

  test("text in place of a mechanism", () => {
    expect(() => simulate("A -> B" as never, GOOD)).toThrow(/expected a mechanism/);
  });

  test("what a progress callback throws comes through", () => {
    const stop = () => {
      throw new RangeError("enough");
    };
    const long = { ...GOOD, times: [100], rtol: 1e-10, progress: stop };
    expect(() => simulate(parseMechanism("A -> B"), long)).toThrow(new RangeError("enough"));
  });
});

test("the third body multiplies the rate of its own steps only", () => {
  const run = simulate(parseMechanism("A + M -> B + M\nC -> D"), {
    rateConstants: { k1: 0.25, k2: 0.25 },
    initial: { A: 1, C: 1, M: 2 },
    times: [1],
  });
  expect(run.concentration("A")[0]).toBeCloseTo(Math.exp(-0.5), 5);
  expect(run.concentration("C")[0]).toBeCloseTo(Math.exp(-0.25), 5);
});
