import { describe, expect, test } from "vitest";
import fc from "fast-check";
import { linearLeastSquares } from "../../lib/statistics/linear_least_squares.ts";
import { correctDigits, reference } from "../reference/reference.ts";

interface Norris {
  readonly data: readonly (readonly [number, number])[];
  readonly certified: {
    readonly parameters: readonly number[];
    readonly standardDeviations: readonly number[];
    readonly residualSumOfSquares: number;
    readonly degreesOfFreedom: number;
  };
}

interface CrystalViolet {
  readonly sets: readonly [{
    readonly data: { readonly time: number[]; readonly absorbance: number[] };
    readonly recomputed: Readonly<
      Record<"lnLineEndValue0.040", { unweighted: number; weightedBySignalSquared: number }>
    >;
  }];
}

describe("Norris", () => {
  // NIST/ITL Statistical Reference Datasets, linear regression, Norris: certified values.
  const norris = reference<Norris>("norris.json");
  const fit = linearLeastSquares({
    x: norris.data.map(([, x]) => x),
    y: norris.data.map(([y]) => y),
  });

  test("9 digits of intercept and slope", () => {
    expect(correctDigits(fit.intercept.value, norris.certified.parameters[0]))
      .toBeGreaterThanOrEqual(9);
    expect(correctDigits(fit.slope.value, norris.certified.parameters[1])).toBeGreaterThanOrEqual(
      9,
    );
  });

  test("9 digits of their standard deviations and of the residual sum of squares", () => {
    fit.coefficients.forEach((c, j) =>
      expect(correctDigits(c.standardError, norris.certified.standardDeviations[j]))
        .toBeGreaterThanOrEqual(9)
    );
    expect(correctDigits(fit.residualSumOfSquares, norris.certified.residualSumOfSquares))
      .toBeGreaterThanOrEqual(9);
    expect(fit.degreesOfFreedom).toBe(norris.certified.degreesOfFreedom);
  });
});

test("the ln line of crystal violet, weighted and unweighted", () => {
  // Readings: Colby College, physical chemistry, Example 3.2.1; end value 0.040 as there; slopes by
  // an independent program, see test/reference/README.md.
  const [set] = reference<CrystalViolet>("crystal_violet.json").sets;
  const signal = set.data.absorbance.map((a) => a - 0.040);
  const expected = set.recomputed["lnLineEndValue0.040"];
  const line = { x: set.data.time, y: signal.map(Math.log) };
  expect(-linearLeastSquares(line).slope.value).toBeCloseTo(expected.unweighted, 6);
  expect(-linearLeastSquares({ ...line, weights: signal.map((s) => s * s) }).slope.value)
    .toBeCloseTo(expected.weightedBySignalSquared, 6);
});

describe("properties", () => {
  const line = fc.tuple(
    fc.double({ min: -100, max: 100, noNaN: true }),
    fc.double({ min: -100, max: 100, noNaN: true }),
  );

  test("points on a line give the line, with r² = 1", () => {
    fc.assert(fc.property(line, ([a, b]) => {
      fc.pre(Math.abs(b) > 1e-3);
      const x = [0, 1, 2, 5, 9];
      const fit = linearLeastSquares({ x, y: x.map((v) => a + b * v) });
      expect(fit.intercept.value).toBeCloseTo(a, 10);
      expect(fit.slope.value).toBeCloseTo(b, 10);
      expect(fit.rSquared).toBeCloseTo(1, 10);
    }));
  });

  test("residuals are orthogonal to every predictor", () => {
    const x = [[1, 2], [2, 1], [3, 5], [4, 3], [5, 8], [6, 1]];
    const y = [3, 1, 4, 1, 5, 9];
    const { residuals } = linearLeastSquares({ x, y });
    for (const column of [x.map(() => 1), x.map(([a]) => a), x.map(([, b]) => b)]) {
      expect(column.reduce((sum, v, i) => sum + v * residuals[i], 0)).toBeCloseTo(0, 10);
    }
  });

  test("a weight of 2 counts as the reading twice", () => {
    const weighted = linearLeastSquares({
      x: [0, 1, 2, 4],
      y: [1, 3, 2, 6],
      weights: [1, 2, 1, 1],
      knownUncertainties: true,
    });
    const twice = linearLeastSquares({
      x: [0, 1, 1, 2, 4],
      y: [1, 3, 3, 2, 6],
      weights: [1, 1, 1, 1, 1],
      knownUncertainties: true,
    });
    weighted.coefficients.forEach((c, j) => {
      expect(c.value).toBeCloseTo(twice.coefficients[j].value, 12);
      expect(c.standardError).toBeCloseTo(twice.coefficients[j].standardError, 12);
    });
  });

  test("a large offset of x does not cost digits of the slope", () => {
    const x = Array.from({ length: 11 }, (_, i) => 1e6 + i);
    const fit = linearLeastSquares({ x, y: x.map((v) => 2 * (v - 1e6)) });
    expect(correctDigits(fit.slope.value, 2)).toBeGreaterThanOrEqual(9);
  });

  test("the line at the mean of x has the smallest error, s/√m", () => {
    const x = [0, 1, 2, 3, 4];
    const fit = linearLeastSquares({ x, y: [1.1, 2.9, 5.2, 6.8, 9.1] });
    const s = Math.sqrt(fit.residualSumOfSquares / fit.degreesOfFreedom);
    expect(fit.at(2).standardError).toBeCloseTo(s / Math.sqrt(5), 12);
    expect(fit.at(2).value).toBeCloseTo((1.1 + 2.9 + 5.2 + 6.8 + 9.1) / 5, 12);
  });

  test("through the origin: slope Σxy/Σx²", () => {
    const fit = linearLeastSquares({ x: [1, 2, 3], y: [2, 3, 7], intercept: false });
    expect(fit.slope.value).toBeCloseTo((2 + 6 + 21) / 14, 12);
    expect(fit.intercept.value).toBe(0);
    expect(fit.degreesOfFreedom).toBe(2);
  });
});

test("two readings give a line without an error", () => {
  const fit = linearLeastSquares({ x: [0, 1], y: [1, 3] });
  expect(fit.slope.value).toBeCloseTo(2, 12);
  expect(fit.slope.standardError).toBeNaN();
});

test.each<[string, Record<string, unknown>, string]>([
  ["lengths that differ", { x: [1, 2], y: [1, 2, 3] }, "x has 2 entries, y 3"],
  ["one reading", { x: [1], y: [1] }, "Cannot fit 2 coefficients to 1 readings"],
  ["nothing", { x: [], y: [] }, "Cannot fit"],
  ["x all the same", { x: [2, 2, 2], y: [1, 2, 3] }, "the predictors determine only 1 of them"],
  ["weights all zero", { x: [1, 2, 3], y: [1, 2, 3], weights: [0, 0, 0] }, "Cannot fit"],
  ["a missing y", { x: [1, 2] }, `both "x" and "y" must be given`],
  ["rows of different length", { x: [[1, 2], [3], [4, 5], [6, 7]], y: [1, 2, 3, 4] }, "Cannot"],
  ["an unknown option", { x: [1, 2], y: [1, 2], weigths: [1, 1] }, `did you mean "weights"?`],
])("%s is refused", (_, options, message) => {
  expect(() => linearLeastSquares(options as never)).toThrow(message);
});
