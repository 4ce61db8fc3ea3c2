import { expect, test } from "vitest";
import { correlation, standardErrors, varianceOf } from "../../lib/statistics/covariance.ts";

const covariance = [[4, -3], [-3, 9]];

test("standard errors are the square roots of the diagonal", () => {
  expect(standardErrors(covariance)).toEqual([2, 3]);
});

test("correlation has ones on the diagonal and −3/(2·3) beside it", () => {
  expect(correlation(covariance)).toEqual([[1, -0.5], [-0.5, 1]]);
});

test("the variance of a sum counts the covariance twice", () => {
  expect(varianceOf([1, 1], covariance)).toBe(4 + 9 - 6);
  expect(varianceOf([1, -1], covariance)).toBe(4 + 9 + 6);
  expect(varianceOf([0, 2], covariance)).toBe(36);
});
