import { expect, test } from "vitest";
import { nestedFTest } from "../../lib/statistics/nested_f_test.ts";

const smaller = { residualSumOfSquares: 30, degreesOfFreedom: 12 };
const larger = { residualSumOfSquares: 10, degreesOfFreedom: 10 };

test("by hand: (30 − 10)/2 over 10/10 is 10 on (2, 10), p = (1 + 10/5)⁻⁵", () => {
  const result = nestedFTest(smaller, larger);
  expect(result.f).toBe(10);
  expect(result.degreesOfFreedom).toEqual([2, 10]);
  // Closed form of the tail for 2 degrees of freedom of the numerator.
  expect(result.probability).toBeCloseTo(3 ** -5, 12);
});

test("a larger model that fits no better has F = 0, p = 1", () => {
  const result = nestedFTest(smaller, { residualSumOfSquares: 30, degreesOfFreedom: 10 });
  expect(result.f).toBe(0);
  expect(result.probability).toBe(1);
});

test.each([
  ["the same model", larger, larger],
  ["the larger model first", larger, smaller],
  ["a larger model without degrees of freedom", smaller, {
    residualSumOfSquares: 0,
    degreesOfFreedom: 0,
  }],
])("%s is refused", (_, one, other) => {
  expect(() => nestedFTest(one, other)).toThrow(
    `Cannot compare models with ${one.degreesOfFreedom} and ${other.degreesOfFreedom} degrees of freedom`,
  );
});
