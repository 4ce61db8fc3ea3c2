import { expect, test } from "vitest";
import { propagate } from "../../lib/statistics/propagate.ts";

test("a linear function has the variance gᵀ C g exactly", () => {
  const sum = propagate(([a, b]) => 2 * a - b, [5, 7], [[4, -3], [-3, 9]], { unit: "s" });
  // By hand: 4·4 + 9 + 2·2·3.
  expect(sum.value).toBe(3);
  expect(sum.standardError).toBeCloseTo(Math.sqrt(37), 6);
  expect(sum.unit).toBe("s");
});

test("a half-life has the relative error of its rate constant", () => {
  const half = propagate(([k]) => Math.LN2 / k, [0.2902], [[0.00192 ** 2]], {
    unit: "min",
    degreesOfFreedom: 6,
  });
  expect(half.relativeStandardError).toBeCloseTo(0.00192 / 0.2902, 8);
  expect(half.degreesOfFreedom).toBe(6);
});

test("a parameter that does not enter does not spoil the result", () => {
  const f = propagate(([a]) => 3 * a, [1, 2], [[1, NaN], [NaN, NaN]], { unit: "1" });
  expect(f.standardError).toBeCloseTo(3, 6);
});

test("a parameter that enters and has no error leaves none to the result", () => {
  const f = propagate(([a, b]) => a * b, [1, 2], [[1, NaN], [NaN, NaN]], { unit: "1" });
  expect(f.value).toBe(2);
  expect(f.standardError).toBeNaN();
});
