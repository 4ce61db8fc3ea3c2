import { describe, expect, test } from "vitest";
import {
  chiSquareUpperTail,
  fisherUpperTail,
  normalTwoSided,
  studentFactor,
  studentTwoSided,
} from "../../lib/statistics/distributions.ts";
import { correctDigits } from "../reference/reference.ts";

/** Half a unit of the last printed digit moves the probability by less than this share. */
const BY_TABLE = 3e-3;

describe("Student's t", () => {
  // NIST/SEMATECH e-Handbook of Statistical Methods, 1.3.6.7.2.
  test.each([
    [0.90, 1, 6.314],
    [0.95, 1, 12.706],
    [0.99, 1, 63.657],
    [0.95, 2, 4.303],
    [0.95, 6, 2.447],
    [0.99, 10, 3.169],
    [0.95, 20, 2.086],
    [0.95, 100, 1.984],
    [0.95, Infinity, 1.960],
    [0.99, Infinity, 2.576],
  ])("level %d with %d degrees of freedom: %d", (level, freedom, t) => {
    expect(studentFactor(level, freedom).toFixed(3)).toBe(t.toFixed(3));
    expect(Math.abs(studentTwoSided(t, freedom) / (1 - level) - 1)).toBeLessThan(BY_TABLE);
  });

  test("with one degree of freedom it is Cauchy's distribution", () => {
    for (const t of [0.1, 1, 10, 1e4]) {
      expect(correctDigits(studentTwoSided(t, 1), 2 * Math.atan(1 / t) / Math.PI)).toBeGreaterThan(
        9,
      );
    }
  });

  test("the sign does not count", () => {
    expect(studentTwoSided(-2.5, 7)).toBe(studentTwoSided(2.5, 7));
  });
});

describe("Fisher's F", () => {
  // NIST/SEMATECH e-Handbook of Statistical Methods, 1.3.6.7.3, quoted from memory; the figures
  // agree with SciPy 1.x, scipy.stats.f.isf.
  test.each([
    [0.05, 1, 10, 4.965],
    [0.05, 2, 10, 4.103],
    [0.05, 3, 10, 3.708],
    [0.05, 5, 20, 2.711],
    [0.05, 10, 30, 2.165],
    [0.01, 1, 10, 10.044],
    [0.01, 2, 20, 5.849],
    [0.10, 2, 10, 2.924],
  ])(
    "probability %d with (%d, %d) degrees of freedom: %d",
    (probability, numerator, denominator, f) => {
      const tail = fisherUpperTail(f, numerator, denominator);
      expect(Math.abs(tail / probability - 1)).toBeLessThan(BY_TABLE);
    },
  );

  test("with (2, 2ν) degrees of freedom the tail is (1 + f/ν)^−ν, down to tiny ones", () => {
    for (const f of [0.1, 1, 10, 1000]) {
      for (const half of [1, 5, 20]) {
        expect(correctDigits(fisherUpperTail(f, 2, 2 * half), (1 + f / half) ** -half))
          .toBeGreaterThan(9);
      }
    }
  });

  test("t² is F with (1, ν)", () => {
    expect(fisherUpperTail(2.5 ** 2, 1, 7)).toBeCloseTo(studentTwoSided(2.5, 7), 12);
  });

  test("ends: nothing exceeds infinity, everything exceeds 0, not a number stays so", () => {
    expect(fisherUpperTail(Infinity, 3, 4)).toBe(0);
    expect(fisherUpperTail(0, 3, 4)).toBe(1);
    expect(fisherUpperTail(NaN, 3, 4)).toBeNaN();
  });
});

describe("χ²", () => {
  // NIST/SEMATECH e-Handbook of Statistical Methods, 1.3.6.7.4, quoted from memory; the figures
  // agree with SciPy 1.x, scipy.stats.chi2.isf.
  test.each([
    [0.05, 1, 3.841],
    [0.05, 2, 5.991],
    [0.05, 5, 11.070],
    [0.05, 10, 18.307],
    [0.05, 30, 43.773],
    [0.05, 100, 124.342],
    [0.01, 10, 23.209],
    [0.001, 1, 10.828],
    [0.001, 10, 29.588],
  ])("probability %d with %d degrees of freedom: %d", (probability, freedom, value) => {
    expect(Math.abs(chiSquareUpperTail(value, freedom) / probability - 1)).toBeLessThan(BY_TABLE);
  });

  test("with 2 degrees of freedom the tail is exp(−x/2), down to tiny ones", () => {
    for (const x of [0.1, 1, 10, 60, 200]) {
      expect(correctDigits(chiSquareUpperTail(x, 2), Math.exp(-x / 2)), `at ${x}`).toBeGreaterThan(
        8,
      );
    }
  });
});

test("the normal distribution", () => {
  // NIST/SEMATECH e-Handbook, 1.3.6.7.1: 1.96 and 2.576 (last row of the table of t above).
  expect(Math.abs(normalTwoSided(1.960) / 0.05 - 1)).toBeLessThan(BY_TABLE);
  expect(Math.abs(normalTwoSided(2.576) / 0.01 - 1)).toBeLessThan(BY_TABLE);
  expect(normalTwoSided(0)).toBe(1);
  // SciPy: 2·norm.sf(10) = 1.523970604832094e-23.
  expect(correctDigits(normalTwoSided(10), 1.523970604832094e-23)).toBeGreaterThan(9);
});
