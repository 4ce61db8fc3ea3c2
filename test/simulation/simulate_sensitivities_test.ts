import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { mechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { simulate } from "../../lib/simulation/simulate.ts";
import { simulateSensitivities } from "../../lib/simulation/simulate_sensitivities.ts";
import { prepare, problem } from "../bench/problems.ts";
import { randomMechanism } from "./random_mechanism.ts";

describe("sensitivities follow their closed forms", () => {
  const times = [0, 0.5, 2, 2.01, 2.02, 6];
  test("A → B: ∂[A]/∂k = −t [A], ∂[A]/∂[A]₀ = [A]/[A]₀", () => {
    const run = simulateSensitivities(mechanism`A ->[k] B`, {
      rateConstants: { k: 0.8 },
      initial: { A: 2 },
      times,
      rtol: 1e-8,
      parameters: ["k", "[A]"],
    });
    const a = (t: number) => 2 * Math.exp(-0.8 * t);
    run.sensitivity("A", "k").forEach((s, i) =>
      expect(Math.abs(s + times[i] * a(times[i]))).toBeLessThan(1e-6)
    );
    run.sensitivity("B", "k").forEach((s, i) =>
      expect(Math.abs(s - times[i] * a(times[i]))).toBeLessThan(1e-6)
    );
    run.sensitivity("A", "[A]").forEach((s, i) =>
      expect(Math.abs(s - a(times[i]) / 2)).toBeLessThan(1e-6)
    );
    run.logarithmic("A", "k").forEach((s, i) =>
      expect(Math.abs(s + 0.8 * times[i] * a(times[i]))).toBeLessThan(1e-6)
    );
  });
  test("concentrations at the start may carry their unit", () => {
    const run = simulateSensitivities(mechanism`A ->[k] B`, {
      rateConstants: { k: 1 },
      initial: { A: "20 mmol/L" },
      times: [1],
      parameters: ["[A]"],
    });
    expect(run.logarithmic("A", "[A]")[0]).toBeCloseTo(0.02 * Math.exp(-1), 7);
  });
  test("a constant shared by two steps, and a third body", () => {
    const run = simulateSensitivities(
      mechanism`
      A + M ->[k] B + M
      A ->[k] C`,
      { rateConstants: { k: 0.5 }, initial: { A: 1, M: 3 }, times: [1], rtol: 1e-8 },
    );
    // d[A]/dt = −(3 + 1) k [A]
    expect(run.sensitivity("A", "k")[0]).toBeCloseTo(-4 * Math.exp(-2), 6);
  });
});

test("they are the limit of finite differences, to 5 digits, over random networks", () => {
  fc.assert(
    fc.property(randomMechanism(6), (random) => {
      const options = {
        rateConstants: random.rateConstants,
        initial: random.initial,
        times: [0.01, 1],
        rtol: 1e-9,
      };
      const species = random.mechanism.species;
      const symbols = random.mechanism.rateConstants.slice(0, 3);
      const run = simulateSensitivities(random.mechanism, {
        ...options,
        parameters: [...symbols, `[${species[0]}]`],
      });
      const check = (
        name: string,
        size: number,
        moved: (factor: number) => Partial<typeof options>,
      ) => {
        const at = (factor: number) =>
          simulate(random.mechanism, { ...options, ...moved(factor), rtol: 1e-12, atol: 1e-16 });
        const h = 1e-3;
        const runs = [1 - 2 * h, 1 - h, 1 + h, 1 + 2 * h].map(at);
        for (const s of species) {
          const [a, b, c, d] = runs.map((r) => r.concentration(s));
          run.sensitivity(s, name).forEach((value, i) => {
            const difference = (a[i] - d[i] + 8 * (c[i] - b[i])) / (12 * h * size);
            const scale = Math.abs(difference) + 0.05 * Math.abs(b[i]) / size + 1e-4;
            expect(Math.abs(value - difference)).toBeLessThan(1e-5 * scale);
          });
        }
      };
      for (const symbol of symbols) {
        const k = random.rateConstants[symbol];
        check(symbol, k, (f) => ({ rateConstants: { ...random.rateConstants, [symbol]: k * f } }));
      }
      const start = random.initial[species[0]];
      check(
        `[${species[0]}]`,
        start,
        (f) => ({ initial: { ...random.initial, [species[0]]: start * f } }),
      );
    }),
    { numRuns: 15 },
  );
});

// Extended-precision sensitivities (test/reference/simulation): ∂y/∂ln k.
test.each(["robertson", "hires", "pollu"])(
  "%s: those of the extended-precision solution",
  (name) => {
    const p = problem(name);
    const { mechanism, rateConstants, initial } = prepare(p);
    const run = simulateSensitivities(mechanism, {
      rateConstants,
      initial,
      times: p.times,
      rtol: 1e-7,
      atol: 1e-7 * p.atolFactor,
    });
    const { outputs, floor, values } = p.reference!.sensitivities!;
    outputs.forEach((output, at) => {
      mechanism.rateConstants.forEach((k, j) => {
        p.species.forEach((species, i) => {
          const expected = values[at][j][i];
          const error = Math.abs(run.logarithmic(species, k)[output] - expected);
          expect(error, `${species}, ${k}`).toBeLessThan(1e-5 * (Math.abs(expected) + floor[i]));
        });
      });
    });
  },
);

test("what is no parameter is said", () => {
  const run = (parameters: string[]) => () =>
    simulateSensitivities(mechanism`A -> B`, {
      rateConstants: { k1: 1 },
      initial: { A: 1 },
      times: [1],
      parameters,
    });
  expect(run(["k9"])).toThrow(
    /"k9": expected a rate constant \(k1\) or a species in brackets such as "\[A\]"/,
  );
  expect(run(["[Q]"])).toThrow(TypeError);
  expect(() => run(["k1"])().sensitivity("Q", "k1")).toThrow(/no such species/);
});
