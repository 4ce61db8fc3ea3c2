import { expect, test } from "vitest";
import { durbinWatson } from "../../lib/statistics/durbin_watson.ts";
import { nonlinearLeastSquares } from "../../lib/statistics/nonlinear_least_squares.ts";
import { reference } from "../reference/reference.ts";

interface CrystalViolet {
  readonly sets: readonly [{
    readonly data: { readonly time: number[]; readonly absorbance: number[] };
    readonly recomputed: {
      readonly firstOrder: { readonly durbinWatson: number; readonly residualSigns: string };
    };
  }];
}

test("crystal violet: 1.112, signs + − − + + + + − −", () => {
  // Readings: Colby College, physical chemistry, Example 3.2.1; the figures in 40-digit arithmetic,
  // see test/reference/README.md.
  const [{ data, recomputed }] = reference<CrystalViolet>("crystal_violet.json").sets;
  const { residuals } = nonlinearLeastSquares({
    model: ([t], [a0, end, k]) => end + (a0 - end) * Math.exp(-k * t),
    x: data.time.map((t) => [t]),
    y: data.absorbance,
    start: [1, 0, 0.1],
  });
  expect(durbinWatson(residuals)).toBeCloseTo(1.112, 3);
  expect(durbinWatson(residuals)).toBeCloseTo(recomputed.firstOrder.durbinWatson, 6);
  const signs = Array.from(residuals, (r) => r > 0 ? "+" : "-").join("");
  expect(signs).toBe(recomputed.firstOrder.residualSigns);
  expect(signs).toBe("+--++++--");
});

test("by hand", () => {
  // (1 + 1)²·3/4: signs that alternate; (2 − 1)² + (3 − 2)² over 1 + 4 + 9.
  expect(durbinWatson([1, -1, 1, -1])).toBe(3);
  expect(durbinWatson([1, 2, 3])).toBeCloseTo(2 / 14, 15);
});

test("it does not depend on the size of the residuals and is not defined for none", () => {
  const residuals = [0.3, -0.1, 0.4, -0.5];
  expect(durbinWatson(residuals.map((r) => 1e-6 * r))).toBeCloseTo(durbinWatson(residuals), 12);
  expect(durbinWatson([0, 0, 0])).toBeNaN();
});
