import { describe, expect, test } from "vitest";
import { ALPHA, GAMMA, MOST_ORDER, rescaling } from "../../lib/simulation/bdf_coefficients.ts";

/** Backward differences ∇^j p(0), j = 0 … order, of a function on the grid 0, −h, −2h … */
function differences(p: (t: number) => number, h: number, order: number): number[] {
  let row = Array.from({ length: order + 1 }, (_, i) => p(-i * h));
  const out: number[] = [];
  for (let j = 0; j <= order; j++) {
    out.push(row[0]);
    row = row.slice(0, -1).map((v, i) => v - row[i + 1]);
  }
  return out;
}

describe.each([1, 2, 3, 4, 5])("order %i", (order) => {
  const polynomial = (t: number) => {
    let value = 0;
    for (let q = 0; q <= order; q++) value += (q + 1) * Math.pow(t - 0.3, q);
    return value;
  };

  test.each([0.3, 0.9, 1.7])("differences of a polynomial are rescaled exactly by %d", (factor) => {
    const m = order + 1;
    const matrix = new Float64Array(36);
    rescaling(order, factor, matrix, new Float64Array(72));
    const before = differences(polynomial, 0.1, order);
    const after = differences(polynomial, 0.1 * factor, order);
    for (let j = 0; j < m; j++) {
      let sum = 0;
      for (let q = 0; q < m; q++) sum += matrix[q * m + j] * before[q];
      expect(sum).toBeCloseTo(after[j], 9);
    }
  });

  test("Σ γ_j ∇^j y = h y′ for polynomials of its degree", () => {
    const h = 0.01;
    const d = differences(polynomial, h, order);
    let sum = 0;
    for (let j = 1; j <= order; j++) sum += d[j] / j;
    const slope = (polynomial(1e-4) - polynomial(-1e-4)) / 2e-4;
    expect(sum / h / slope).toBeCloseTo(1, 6);
  });
});

test("coefficients are those of the published table", () => {
  // Shampine and Reichelt (1997), table 1 (from memory): κ of orders 1 to 5
  const kappa = [-0.185, -1 / 9, -0.0823, -0.0415, 0];
  for (let k = 1; k <= MOST_ORDER; k++) {
    expect(ALPHA[k] / GAMMA[k]).toBeCloseTo(1 - kappa[k - 1], 12);
  }
});
