import prand from "pure-rand";
import { describe, expect, test } from "vitest";
import { GAS_CONSTANT } from "../../lib/quantity/constants.ts";
import { remainingFraction } from "../../lib/rate_law/integrated_law.ts";
import type { Run } from "../../lib/run/run.ts";
import { fitArrhenius } from "../../lib/temperature/fit_arrhenius.ts";
import { correctDigits } from "../reference/reference.ts";
import { makeRun } from "../rate_law/make_run.ts";

const ENERGY = 80_000;
const TEMPERATURES = [303.15, 313.15, 323.15, 333.15];

/** Runs made from the Arrhenius equation itself. */
function simulated(options: {
  noise?: number;
  seed?: number;
  order?: number;
  bathError?: number;
  raw?: boolean;
  counts?: readonly number[];
}): Run[] {
  const { noise = 0, seed = 1, order = 1, bathError = 0, raw = false } = options;
  const generator = prand.xoroshiro128plus(seed);
  const uniform = () => prand.unsafeUniformIntDistribution(1, 2 ** 31, generator) / 2 ** 31;
  const normal = () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
  return TEMPERATURES.map((temperature, r) => {
    const c0 = 0.01 * (1 + r % 2);
    const T = temperature + bathError * normal();
    const k = 2e-4 * Math.exp(-ENERGY / GAS_CONSTANT * (1 / T - 1 / 318.15)) * 0.01 ** (1 - order);
    const kappa = k * c0 ** (order - 1);
    const count = options.counts?.[r] ?? 15;
    const times = Array.from({ length: count }, (_, i) => 3 * i / (count - 1) / kappa);
    const fractions = times.map((t) => remainingFraction(order, kappa, t) + noise * normal());
    return makeRun({
      id: `${r}`,
      temperature,
      times,
      values: fractions.map((f) => raw ? 0.1 + 0.8 * f : c0 * f),
      unit: raw ? "AU" : "mol/L",
      initial: raw ? { A: c0 } : undefined,
    });
  });
}

test.each([[1, false], [2, false], [1, true], [0.5, true], [2, true]])(
  "order %d, raw signal %s: exact data give back Ea and k",
  (order, raw) => {
    const fit = fitArrhenius(simulated({ order, raw }), { order });
    expect(correctDigits(fit.activationEnergy.value, ENERGY / 1000)).toBeGreaterThan(6);
    const k = fit.rateConstantAt(318.15);
    expect(correctDigits(k.value, 2e-4 * 0.01 ** (1 - order))).toBeGreaterThan(6);
  },
);

test("one step and two steps agree within 0.1 standard error on clean data", () => {
  // Equal signals and equal noise: all runs have the same design in units of their own half-life, so
  // that every ln k is equally certain, and the second step weighs them so.
  const fit = fitArrhenius(simulated({ noise: 0.002, seed: 5, raw: true }));
  const difference = Math.abs(fit.activationEnergy.value - twoStepWithEqualWeights(fit));
  expect(difference / fit.activationEnergy.standardError).toBeLessThan(0.1);
});

/** The second step with equal relative errors. */
function twoStepWithEqualWeights(fit: ReturnType<typeof fitArrhenius>): number {
  return fitArrhenius(fit.points.map(({ temperature, rateConstant }) => ({
    temperature,
    rateConstant: rateConstant.value,
    standardError: 0.01 * rateConstant.value,
  }))).activationEnergy.value;
}

test("the interval covers the truth in 95 % of simulations, runs of unequal size", () => {
  const trials = 300;
  let covered = 0;
  for (let seed = 0; seed < trials; seed++) {
    const fit = fitArrhenius(simulated({ noise: 0.01, seed: seed + 100, counts: [8, 30, 10, 20] }));
    const [low, high] = fit.activationEnergy.interval(0.95);
    if (low < ENERGY / 1000 && ENERGY / 1000 < high) covered++;
  }
  // Three binomial standard deviations are 0.038; the widening after a failed test can only help.
  expect(covered / trials).toBeGreaterThan(0.912);
  expect(covered / trials).toBeLessThan(0.988);
});

describe("a bath that wanders", () => {
  const fit = fitArrhenius(simulated({ noise: 0.003, seed: 9, bathError: 0.5 }));

  test("is found by the F test of the line, widens the errors and says so", () => {
    expect(fit.lackOfFit!.probability).toBeLessThan(0.01);
    expect(fit.cautions.map((c) => c.code)).toContain("runs-scatter-about-line");
    expect(fit.degreesOfFreedom).toBe(2);
  });

  test("and the line still holds the truth", () => {
    const [low, high] = fit.activationEnergy.interval(0.95);
    expect(low).toBeLessThan(ENERGY / 1000);
    expect(high).toBeGreaterThan(ENERGY / 1000);
  });
});

test("a run without a temperature is an error that says where to give it", () => {
  const runs = simulated({});
  const lost = makeRun({ id: "lost", times: [0, 1, 2, 3], values: [1, 0.5, 0.25, 0.13] });
  expect(() => fitArrhenius([...runs, lost])).toThrow(/run "lost" has no temperature.*column/);
});

test("the result shows the rate equation that defines k", () => {
  const fit = fitArrhenius(simulated({ noise: 0.005, order: 2, raw: true }), { order: 2 });
  expect(`${fit}`).toContain("−d[A]/dt = k[A]²");
  expect(fit.rateConstantAtReference.unit).toBe("L mol⁻¹ s⁻¹");
});
