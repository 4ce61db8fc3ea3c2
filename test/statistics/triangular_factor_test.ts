import { expect, test } from "vitest";
import fc from "fast-check";
import { triangularize } from "../../lib/statistics/triangular_factor.ts";

const M = 6;
const N = 3;
const entries = fc.array(fc.double({ min: -100, max: 100, noNaN: true }), {
  minLength: M * N,
  maxLength: M * N,
});

/** An entry whose square underflows. */
const TINY = [...new Array(10).fill(0), 1.5717277847026288e-162, ...new Array(7).fill(0)];

/** AᵀA of the first `rows` rows. */
function gram(a: ArrayLike<number>, rows: number): number[] {
  const out: number[] = [];
  for (let j = 0; j < N; j++) {
    for (let k = 0; k < N; k++) {
      let sum = 0;
      for (let i = 0; i < rows; i++) sum += a[i * N + j] * a[i * N + k];
      out.push(sum);
    }
  }
  return out;
}

test("RᵀR is AᵀA: the columns keep their lengths and angles", () => {
  fc.assert(
    fc.property(entries, (values) => {
      const a = Float64Array.from(values);
      triangularize(a, new Float64Array(M), M, N);
      const r = new Float64Array(N * N);
      for (let i = 0; i < N; i++) for (let j = i; j < N; j++) r[i * N + j] = a[i * N + j];
      const expected = gram(values, M);
      const size = Math.max(...expected.map(Math.abs), 1e-300);
      gram(r, N).forEach((value, i) =>
        expect(Math.abs(value - expected[i]) / size).toBeLessThan(1e-13)
      );
    }),
    { examples: [[TINY]] },
  );
});

test("the right-hand side keeps its length and its products with the columns", () => {
  fc.assert(
    fc.property(entries, (values) => {
      const b = Float64Array.of(1, -2, 3, 0.5, 7, -4);
      const a = Float64Array.from(values);
      const products = [0, 1, 2].map((j) =>
        b.reduce((sum, v, i) => sum + v * values[i * N + j], 0)
      );
      const square = b.reduce((sum, v) => sum + v * v, 0);
      triangularize(a, b, M, N);
      expect(b.reduce((sum, v) => sum + v * v, 0)).toBeCloseTo(square, 10);
      products.forEach((product, j) => {
        let sum = 0;
        for (let i = 0; i <= j; i++) sum += a[i * N + j] * b[i];
        expect(Math.abs(sum - product)).toBeLessThan(1e-10);
      });
    }),
    { examples: [[TINY]] },
  );
});

test("a column of zeros is left alone", () => {
  const a = Float64Array.of(0, 1, 0, 2);
  triangularize(a, Float64Array.of(1, 1), 2, 2);
  expect([...a].every(Number.isFinite)).toBe(true);
});
