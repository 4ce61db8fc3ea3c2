import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { mechanism, parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { simulate, type SimulateOptions } from "../../lib/simulation/simulate.ts";
import { randomMechanism } from "./random_mechanism.ts";

const METHODS = ["rosenbrock", "bdf"] as const;
const RTOL = 1e-8;

/** Closed forms: P. Atkins and J. de Paula, Physical chemistry, integrated rate laws; Bateman (1910). */
const CLOSED: [
  string,
  string,
  Record<string, number>,
  Record<string, number>,
  string,
  (t: number) => number,
][] = [
  ["order 0", "∅ -> P", { k1: 0.3 }, {}, "P", (t) => 0.3 * t],
  ["order 1", "A -> P", { k1: 0.7 }, { A: 2 }, "A", (t) => 2 * Math.exp(-0.7 * t)],
  ["order 2", "2 A -> P", { k1: 0.4 }, { A: 1.5 }, "A", (t) => 1 / (1 / 1.5 + 2 * 0.4 * t)],
  ["order 3", "3 A -> P", { k1: 0.2 }, { A: 1 }, "A", (t) => 1 / Math.sqrt(1 + 2 * 3 * 0.2 * t)],
  ["A + B", "A + B -> P", { k1: 0.9 }, { A: 1, B: 0.6 }, "A", (t) => {
    const e = Math.exp(0.9 * (1 - 0.6) * t);
    return 0.4 * e / (e - 0.6);
  }],
  [
    "reversible",
    "A <=> B",
    { k1: 0.5, "k-1": 0.25 },
    { A: 1 },
    "A",
    (t) => (1 + 2 * Math.exp(-0.75 * t)) / 3,
  ],
  [
    "parallel",
    "A -> B\nA -> C",
    { k1: 0.3, k2: 0.6 },
    { A: 1 },
    "C",
    (t) => 2 / 3 * (1 - Math.exp(-0.9 * t)),
  ],
  [
    "autocatalytic",
    "A + B -> 2 B",
    { k1: 1.1 },
    { A: 1, B: 0.01 },
    "B",
    (t) => 1.01 / (1 + 100 * Math.exp(-1.1 * 1.01 * t)),
  ],
  ["third body", "A + M -> B + M", { k1: 0.1 }, { A: 1, M: 5 }, "A", (t) => Math.exp(-0.5 * t)],
  [
    "chain of three",
    "A -> B\nB -> C\nC -> D",
    { k1: 1, k2: 2, k3: 3 },
    { A: 1 },
    "C",
    (t) => 2 * (Math.exp(-t) / 2 - Math.exp(-2 * t) + Math.exp(-3 * t) / 2),
  ],
];

describe.each(METHODS)("%s", (method) => {
  test.each(CLOSED)(
    "%s follows its closed form",
    (_name, text, rateConstants, initial, species, exact) => {
      const times = [0, 0.1, 0.5, 1, 1.01, 1.02, 1.03, 1.04, 3, 7];
      const run = simulate(parseMechanism(text), {
        rateConstants,
        initial,
        times,
        rtol: RTOL,
        method,
      });
      expect(run.finished).toBe(true);
      run.concentration(species).forEach((value, i) => {
        expect(Math.abs(value - exact(times[i]))).toBeLessThanOrEqual(
          10 * RTOL * Math.abs(exact(times[i])) + 1e-15,
        );
      });
    },
  );

  test("outputs close together are as exact as outputs that stand alone", () => {
    const times = Float64Array.from({ length: 2001 }, (_, i) => i / 200);
    const run = simulate(mechanism`A -> B`, {
      rateConstants: { k1: 1 },
      initial: { A: 1 },
      times,
      rtol: RTOL,
      method,
    });
    run.concentration("A").forEach((value, i) => {
      expect(Math.abs(value / Math.exp(-times[i]) - 1)).toBeLessThanOrEqual(10 * RTOL);
    });
  });

  test("conserved sums are kept to 1e-10 over random networks", () => {
    fc.assert(
      fc.property(randomMechanism(), ({ mechanism, rateConstants, initial, mass }) => {
        const run = simulate(mechanism, {
          rateConstants,
          initial,
          times: [0.01, 1, 100],
          method,
          rtol: 1e-5,
        });
        expect(run.finished, run.reason).toBe(true);
        expect(run.conservedQuantities.length).toBeGreaterThan(0);
        for (const { drift } of run.conservedQuantities) expect(drift).toBeLessThan(1e-10);
        const total = (at: number) =>
          mechanism.species.reduce((sum, s) => sum + mass[s] * run.concentration(s)[at], 0);
        const start = mechanism.species.reduce((sum, s) => sum + mass[s] * initial[s], 0);
        for (let at = 0; at < 3; at++) expect(Math.abs(total(at) / start - 1)).toBeLessThan(1e-10);
      }),
      { numRuns: 40 },
    );
  });

  test("the result does not hang on the order of steps or of species", () => {
    fc.assert(
      fc.property(randomMechanism(), (random) => {
        const options = {
          initial: random.initial,
          rateConstants: random.rateConstants,
          times: [0.1, 10],
          rtol: 1e-9,
          method,
        };
        const one = simulate(random.mechanism, options);
        const turned = parseMechanism([...random.lines].reverse().join("\n"));
        const other = simulate(turned, options);
        for (const species of random.mechanism.species) {
          const [a, b] = [one.concentration(species), other.concentration(species)];
          a.forEach((value, i) =>
            expect(Math.abs(value - b[i])).toBeLessThan(1e-7 * (Math.abs(value) + 1e-3))
          );
        }
      }),
      { numRuns: 25 },
    );
  });
});

describe("an integration that cannot be finished says so", () => {
  const base = { rateConstants: { k1: 1 }, initial: { A: 1 } };
  test("a blow-up: time, species, what to try", () => {
    const run = simulate(mechanism`2 A -> 3 A`, { ...base, times: [0.5, 2] });
    expect(run.finished).toBe(false);
    expect(run.timeReached).toBeCloseTo(1, 4);
    expect([...run.times]).toEqual([0.5]);
    expect(run.concentration("A")[0]).toBeCloseTo(2, 4);
    expect(run.reason).toMatch(
      /Cannot integrate past t = 1 s: .*\[A\] has grown to .* add the step/,
    );
    expect(run.cautions).toMatchObject([{ code: "unfinished", severity: "serious" }]);
    expect(run.toString()).toMatch(/^UNFINISHED/);
  });
  test("steps used up", () => {
    const run = simulate(mechanism`A -> B`, { ...base, times: [1, 100], maxSteps: 3 });
    expect(run.finished).toBe(false);
    expect(run.reason).toMatch(/3 steps are used up; raise maxSteps/);
  });
  test("aborted from the progress callback", () => {
    const stop = new AbortController();
    const seen: number[] = [];
    const run = simulate(mechanism`A <=> B`, {
      rateConstants: { k1: 1, "k-1": 1e-3 },
      initial: { A: 1 },
      times: Array.from({ length: 3000 }, (_, i) => i * 10),
      rtol: 1e-12,
      signal: stop.signal,
      progress: (time, steps) => {
        seen.push(time, steps);
        stop.abort();
      },
    });
    expect(run.finished).toBe(false);
    expect(run.reason).toMatch(/aborted by the signal/);
    expect(seen[1]).toBe(32);
  });
});

describe("what cannot be used is said", () => {
  const steps = mechanism`A -> B`;
  const good: SimulateOptions = { rateConstants: { k1: 1 }, initial: { A: 1 }, times: [1] };
  test.each([
    [{ rateConstants: {} }, TypeError, /"k1"/],
    [{ rateConstants: { k1: 1, k2: 2 } }, TypeError, /"k2"/],
    [{ rateConstants: { k1: -1 } }, RangeError, /-1/],
    [{ rateConstants: { k1: NaN } }, TypeError, /NaN/],
    [{ initial: { C: 1 } }, TypeError, /"C"/],
    [{ initial: { A: -1 } }, RangeError, /-1/],
    [{ times: [] }, TypeError, /times/],
    [{ times: [2, 1] }, RangeError, /1 s as output time 2/],
    [{ rtol: 0 }, RangeError, /rtol/],
    [{ method: "euler" }, RangeError, /euler/],
    [{ tolerance: 1 }, TypeError, /tolerance/],
    [{ atol: { X: 1 } }, TypeError, /"X"/],
  ])("%j", (change, kind, message) => {
    const call = () => simulate(steps, { ...good, ...change } as SimulateOptions);
    expect(call).toThrow(kind);
    expect(call).toThrow(message);
  });
  test("a species or a step that the mechanism has not", () => {
    const run = simulate(steps, good);
    expect(() => run.concentration("Z")).toThrow(/"Z"/);
    expect(() => run.stepRates(2)).toThrow(/step 2/);
  });
});

test("rates of steps are k times the concentrations, forward less reverse", () => {
  const run = simulate(mechanism`A <=> B`, {
    rateConstants: { k1: 2, "k-1": 1 },
    initial: { A: 1 },
    times: [0, 0.5, 50],
  });
  const [a, b, v] = [run.concentration("A"), run.concentration("B"), run.stepRates(1)];
  v.forEach((rate, i) => expect(rate).toBeCloseTo(2 * a[i] - b[i], 14));
  expect(v[2]).toBeCloseTo(0, 8);
});
