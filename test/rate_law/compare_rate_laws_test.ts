import prand from "pure-rand";
import { describe, expect, test } from "vitest";
import { compareRateLaws } from "../../lib/rate_law/compare_rate_laws.ts";
import { remainingFraction } from "../../lib/rate_law/integrated_law.ts";
import { reference } from "../reference/reference.ts";
import { makeRun } from "./make_run.ts";

const violet = reference<{ sets: { data: { time: number[]; absorbance: number[] } }[] }>(
  "crystal_violet.json",
).sets[0];

test("crystal violet: first order, AICc −92.14 against −51.66", () => {
  // Colby College, physical chemistry, Example 3.2.1; AICc computed from its readings.
  const run = makeRun({
    times: violet.data.time,
    timeUnit: "min",
    values: violet.data.absorbance,
    unit: "AU",
  });
  const comparison = compareRateLaws(run, { orders: [1, 2] });
  expect(comparison.best?.order.value).toBe(1);
  expect(comparison.ranking.map((r) => r.fit.correctedAkaike.toFixed(2))).toEqual([
    "-92.14",
    "-51.66",
  ]);
  expect(comparison.verdict).toContain("AICc higher by 40.5");
});

test.each([
  // OpenStax, Chemistry 2e, section 12.4; order by the source.
  ["int-01-hydrogen-peroxide", 1],
  ["int-03-butadiene", 2],
  ["int-05-second-order-check", 2],
])("%s is of order %d", (id, order) => {
  interface Law {
    id: string;
    data: { time: number[]; concentration: number[] };
    units: { time: string };
    recomputed: { k: number };
    tolerance: { published: { k?: number } };
  }
  const set = reference<{ sets: Law[] }>("integrated_rate_laws.json").sets
    .find((s) => s.id === id)!;
  const run = makeRun({
    times: set.data.time,
    timeUnit: set.units.time,
    values: set.data.concentration,
  });
  const comparison = compareRateLaws(run, { freeOrder: false });
  expect(comparison.ranking[0].fit.order.value).toBe(order);
});

function noise(seed: number): () => number {
  const generator = prand.xoroshiro128plus(seed);
  const uniform = () => prand.unsafeUniformIntDistribution(1, 2 ** 31, generator) / 2 ** 31;
  return () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
}

function simulated(order: number, turns: number, sigma: number, seed: number, c0 = 0.01) {
  const normal = noise(seed);
  const times = Array.from({ length: 20 }, (_, i) => i * 60);
  const kappa = turns / 1140 * (c0 / 0.01) ** (order - 1);
  return makeRun({
    id: `c0 ${c0}`,
    times,
    values: times.map((t) => c0 * remainingFraction(order, kappa, t) + sigma * 0.01 * normal()),
  });
}

describe("verdicts", () => {
  test("fewer than two half-lives: the order cannot be told", () => {
    const comparison = compareRateLaws(simulated(1, 0.9, 0.005, 1));
    expect(comparison.best).toBeUndefined();
    expect(comparison.cautions[0]).toMatchObject({
      code: "too-few-half-lives",
      severity: "serious",
    });
    expect(comparison.verdict).toMatch(/1\.3 half-lives were followed and at least 2/);
  });

  test("too few readings for AICc: no order is named", () => {
    const times = [0, 300, 700, 1500];
    const run = makeRun({ times, values: times.map((t) => 0.01 * Math.exp(-t / 400)) });
    const comparison = compareRateLaws(run);
    expect(comparison.best).toBeUndefined();
    expect(comparison.cautions[0].code).toBe("too-few-readings");
    expect(comparison.verdict).toContain("4 readings are too few");
  });

  test("runs from different concentrations tell the order although few half-lives were followed", () => {
    const runs = [0.01, 0.04].map((c0) => simulated(2, 0.6, 0.01, 3, c0));
    expect(compareRateLaws(runs).best?.order.value).toBe(2);
  });

  test("noise that hides the order: not distinguishable", () => {
    const comparison = compareRateLaws(simulated(1, 2, 0.12, 5), { orders: [1, 1.2] });
    expect(comparison.best).toBeUndefined();
    expect(comparison.cautions[0].code).toBe("orders-not-distinguishable");
  });

  test("an order that is no whole number is said", () => {
    const comparison = compareRateLaws(simulated(1.5, 6, 0.002, 7));
    expect(comparison.cautions.map((c) => c.code)).toContain("order-not-whole");
    expect(comparison.free!.order.value).toBeCloseTo(1.5, 1);
  });

  test("the true order wins in nearly all simulations that follow four half-lives", () => {
    const orders = [0, 1, 2];
    let right = 0;
    for (let seed = 0; seed < 60; seed++) {
      const order = orders[seed % 3];
      const turns = [0.94, 2.8, 15][order];
      const best = compareRateLaws(simulated(order, turns, 0.01, seed), { freeOrder: false }).best;
      if (best?.order.value === order) right++;
    }
    expect(right).toBeGreaterThanOrEqual(58);
  });
});

test("Akaike weights of the converged laws add up to 1", () => {
  const comparison = compareRateLaws(simulated(1, 3, 0.01, 11));
  const total = comparison.ranking.reduce((sum, entry) => sum + entry.weight, 0);
  expect(total).toBeCloseTo(1, 12);
});
