import fc from "fast-check";
import prand from "pure-rand";
import { describe, expect, test } from "vitest";
import { fitRateLaw } from "../../lib/rate_law/fit_rate_law.ts";
import { remainingFraction } from "../../lib/rate_law/integrated_law.ts";
import { correctDigits, reference } from "../reference/reference.ts";
import { makeRun } from "./make_run.ts";

interface CrystalViolet {
  sets: {
    data: { time: number[]; absorbance: number[] };
    recomputed: Record<
      "firstOrder" | "secondOrder",
      { estimates: string[]; standardErrors: string[]; AICc: number; durbinWatson: number }
    >;
  }[];
}

// Colby College, physical chemistry, Example 3.2.1; estimates in 40-digit arithmetic.
const violet = reference<CrystalViolet>("crystal_violet.json").sets[0];
const violetRun = makeRun({
  id: "crystal violet",
  times: violet.data.time,
  timeUnit: "min",
  values: violet.data.absorbance,
  unit: "AU",
  name: "absorbance",
});

describe("crystal violet, raw absorbance, end value free", () => {
  test.each([["firstOrder", 1], ["secondOrder", 2]] as const)("%s", (key, order) => {
    const fit = fitRateLaw(violetRun, { order });
    const expected = violet.recomputed[key];
    const k = fit.rateConstant.in("1/min");
    const [run] = fit.runs;
    expect(fit.converged).toBe(true);
    const estimates = [run.initialValue, run.endValue, k];
    estimates.forEach((estimate, i) => {
      expect(correctDigits(estimate.value, Number(expected.estimates[i]))).toBeGreaterThan(6);
      expect(correctDigits(estimate.standardError, Number(expected.standardErrors[i])))
        .toBeGreaterThan(5);
    });
    expect(fit.correctedAkaike).toBeCloseTo(expected.AICc, 4);
    expect(fit.residualCheck.durbinWatson).toBeCloseTo(expected.durbinWatson, 5);
  });

  test("shows k = 0.29020 ± 0.00192 per minute and its end value 3 standard errors from 0.040", () => {
    const fit = fitRateLaw(violetRun);
    expect(`${fit.rateConstant.in("1/min")}`).toBe("0.2902 ± 0.0019 1/min");
    const { endValue } = fit.runs[0];
    expect((endValue.value - 0.040) / endValue.standardError).toBeCloseTo(3.15, 2);
  });

  test("a rate constant of other order says that the concentration is missing", () => {
    const fit = fitRateLaw(violetRun, { order: 2 });
    expect(fit.rateConstant.unit).toBe("s⁻¹");
    expect(fit.cautions.map((c) => c.code)).toContain("concentration-unknown");
  });
});

test("Guggenheim data: the direct fit of the reference, with its standard error", () => {
  interface EndValue {
    id: string;
    data: { time: number[]; signal: number[] };
    recomputed: { kNonlinear: number; seKNonlinear: number; infinityNonlinear: number };
  }
  // Constructed set, k recomputed by nonlinear least squares (see the file's own note).
  const set = reference<{ sets: EndValue[] }>("end_value_methods.json").sets
    .find((s) => s.id === "gugg-01-decay")!;
  const fit = fitRateLaw(makeRun({ times: set.data.time, values: set.data.signal, unit: "AU" }));
  expect(correctDigits(fit.rateConstant.value, set.recomputed.kNonlinear)).toBeGreaterThan(6);
  expect(correctDigits(fit.rateConstant.standardError, set.recomputed.seKNonlinear))
    .toBeGreaterThan(4);
  expect(correctDigits(fit.runs[0].endValue.value, set.recomputed.infinityNonlinear))
    .toBeGreaterThan(6);
});

describe("noise-free data", () => {
  test("give back k and n at any order, from one run and from two", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 3, noNaN: true }),
        fc.double({ min: -4, max: 0, noNaN: true }),
        (order, logTurns) => {
          const turns = 3 * 10 ** (logTurns / 4);
          const runs = [0.01, 0.05].map((c0, i) => {
            const kappa = 1e-3 * (c0 / 0.01) ** (order - 1) * turns / 3;
            const times = Array.from({ length: 12 }, (_, j) => j * 250);
            return makeRun({
              id: `${i}`,
              times,
              values: times.map((t) => c0 * remainingFraction(order, kappa, t)),
            });
          });
          const fit = fitRateLaw(runs, { order });
          const k = 1e-3 * turns / 3 * 0.01 ** (1 - order);
          expect(correctDigits(fit.rateConstant.value, k)).toBeGreaterThan(6);
          const free = fitRateLaw(runs, { order: "free" });
          expect(free.order.value).toBeCloseTo(order, 4);
        },
      ),
      { numRuns: 40 },
    );
  });

  test("k from a raw signal equals k from the concentration", () => {
    // Field practice: any signal linear in the extent gives the same k (S = S∞ + (S₀ − S∞)·f).
    const times = [0, 60, 120, 240, 400, 700, 1100];
    const c = times.map((t) => 0.02 * Math.exp(-2.5e-3 * t));
    const direct = fitRateLaw(makeRun({ times, values: c }));
    const signal = c.map((value) => 0.08 + 41 * value);
    const raw = fitRateLaw(makeRun({ times, values: signal, unit: "AU" }));
    expect(correctDigits(raw.rateConstant.value, direct.rateConstant.value)).toBeGreaterThan(9);
  });

  test("a rising signal of a product gives the reactant's k", () => {
    const times = [0, 60, 120, 240, 400, 700, 1100];
    const rising = times.map((t) => 1.2 - 0.9 * Math.exp(-2.5e-3 * t));
    const fit = fitRateLaw(makeRun({ times, values: rising, unit: "AU" }));
    expect(correctDigits(fit.rateConstant.value, 2.5e-3)).toBeGreaterThan(8);
  });

  test("time in minutes and in seconds is the same run", () => {
    const values = [1, 0.61, 0.37, 0.22, 0.14];
    const minutes = fitRateLaw(makeRun({ times: [0, 1, 2, 3, 4], timeUnit: "min", values }));
    const seconds = fitRateLaw(makeRun({ times: [0, 60, 120, 180, 240], values }));
    expect(minutes.rateConstant.value).toBe(seconds.rateConstant.value);
  });

  test("a second-order raw signal with a known concentration gives k in L/(mol s)", () => {
    const times = [0, 100, 200, 400, 800, 1600, 3200];
    const [k, c0] = [0.12, 0.02];
    const values = times.map((t) => 0.05 + 0.9 * remainingFraction(2, k * c0, t));
    const run = makeRun({ times, values, unit: "AU", initial: { ester: c0 } });
    const fit = fitRateLaw(run, { order: 2 });
    expect(fit.rateConstant.unit).toBe("L mol⁻¹ s⁻¹");
    expect(correctDigits(fit.rateConstant.value, k)).toBeGreaterThan(8);
    expect(fit.equation.text).toBe("−d[ester]/dt = k[ester]²");
  });
});

test("the 95 % interval of k covers the truth in 95 % of simulations", () => {
  const generator = prand.xoroshiro128plus(20_260);
  const uniform = () => prand.unsafeUniformIntDistribution(1, 2 ** 31, generator) / 2 ** 31;
  const normal = () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
  const times = Array.from({ length: 15 }, (_, i) => i * 120);
  const trials = 1000;
  let covered = 0;
  for (let trial = 0; trial < trials; trial++) {
    const values = times.map((t) => 0.1 + 0.9 * Math.exp(-2e-3 * t) + 0.01 * normal());
    const fit = fitRateLaw(makeRun({ times, values, unit: "AU" }));
    const [low, high] = fit.rateConstant.interval(0.95);
    if (low < 2e-3 && 2e-3 < high) covered++;
  }
  // Three binomial standard deviations about 0.95, √(0.95·0.05/1000) = 0.0069.
  expect(Math.abs(covered / trials - 0.95)).toBeLessThan(0.021);
});

describe("refusals", () => {
  const times = [0, 10, 20, 30, 40];
  const values = [1, 0.8, 0.6, 0.5, 0.4];

  test("temperatures that differ", () => {
    const runs = [300, 310].map((temperature, i) =>
      makeRun({ id: `${i}`, times, values, temperature })
    );
    expect(() => fitRateLaw(runs)).toThrow(/span 10\.0 K.*fitArrhenius/);
  });

  test("too few readings", () => {
    expect(() => fitRateLaw(makeRun({ times: [0, 10], values: [1, 0.5] }))).toThrow(
      /run "1".*2 readings.*at least 3/,
    );
  });

  test("unknown concentrations that cannot share a k", () => {
    const runs = [1, 2].map((i) => makeRun({ id: `${i}`, times, values, unit: "AU" }));
    expect(() => fitRateLaw(runs, { order: 2 })).toThrow(/initial concentration.*"1", "2"/);
    expect(fitRateLaw(runs, { order: 1 }).converged).toBe(true);
  });

  test("options that do not exist or do not fit", () => {
    const run = makeRun({ times, values });
    // deno-lint-ignore no-explicit-any
    expect(() => fitRateLaw(run, { ordre: 1 } as any)).toThrow(/"ordre".*did you mean "order"/);
    // deno-lint-ignore no-explicit-any
    expect(() => fitRateLaw(run, { order: "first" } as any)).toThrow(/"first"/);
    expect(() => fitRateLaw([])).toThrow(/no runs/);
    expect(() => fitRateLaw(run, { endValue: "3 min" })).toThrow(/measures time/);
  });

  test("an aborted fit is marked, has no errors, and keeps its best point", () => {
    const stop = new AbortController();
    stop.abort();
    const fit = fitRateLaw(makeRun({ times, values: [1, 0.83, 0.6, 0.51, 0.4] }), {
      signal: stop.signal,
    });
    expect(fit.converged).toBe(false);
    expect(fit.rateConstant.standardError).toBeNaN();
    expect(fit.rateConstant.value).toBeGreaterThan(0);
    expect(fit.cautions[0].code).toBe("not-converged");
    expect(fit.title).toContain("NOT CONVERGED");
  });
});

test("reads well in four places from one list", () => {
  const fit = fitRateLaw(violetRun);
  // deno-lint-ignore no-explicit-any
  const bundle = (fit as any)[Symbol.for("Jupyter.display")]();
  expect(bundle["text/plain"]).toBe(`${fit}`);
  expect(bundle["text/html"]).toContain("rate constant k");
  const json = JSON.parse(JSON.stringify(fit));
  expect(json.rateConstant.unit).toBe("s⁻¹");
  expect(json.equation).toBe(fit.equation.text);
  expect(json.runs[0].endValue.value).toBeCloseTo(0.04602, 5);
});
