/** Highest order of the backward differentiation formulas. */
export const MOST_ORDER = 5;

/** κ_k of the numerical differentiation formulas, k = 0 … 5: they trade a little of the angle of
 * stability for a smaller error.
 *
 * Source: L. F. Shampine and M. W. Reichelt, The MATLAB ODE suite, SIAM J. Sci. Comput. 18 (1997) 1,
 * table 1. */
const KAPPA = [0, -0.1850, -1 / 9, -0.0823, -0.0415, 0];

/** γ_k = Σ_{j=1}^k 1/j. */
export const GAMMA: readonly number[] = KAPPA.map((_, k) => {
  let sum = 0;
  for (let j = 1; j <= k; j++) sum += 1 / j;
  return sum;
});

/** α_k = (1 − κ_k) γ_k: (α/h) (y − y_predicted) + Σ (γ_j/h) ∇^j y = f(y). */
export const ALPHA: readonly number[] = KAPPA.map((kappa, k) => (1 - kappa) * GAMMA[k]);

/** Factor from the difference of corrector and predictor to the local error, κ_k γ_k + 1/(k + 1). */
export const ERROR: readonly number[] = [
  ...KAPPA.map((kappa, k) => kappa * GAMMA[k] + 1 / (k + 1)),
  1 / (MOST_ORDER + 2),
];

/** The matrix that turns backward differences ∇^j y, j = 0 … order, of step h into those of step
 * `factor` h, row-major: D_new = Rᵀ D with R = R(factor) R(1).
 *
 * Source: Shampine and Reichelt (1997), sec. 2.2.
 * @param matrix where it is written, (order + 1)² numbers
 * @param scratch 2 (order + 1)² numbers */
export function rescaling(
  order: number,
  factor: number,
  matrix: Float64Array,
  scratch: Float64Array,
): void {
  const m = order + 1;
  const other = scratch.subarray(m * m, 2 * m * m);
  fillR(scratch, m, factor);
  fillR(other, m, 1);
  for (let i = 0; i < m; i++) {
    for (let j = 0; j < m; j++) {
      let sum = 0;
      for (let q = 0; q < m; q++) sum += scratch[i * m + q] * other[q * m + j];
      matrix[i * m + j] = sum;
    }
  }
}

/** R_ij = ∏_{q=1}^i (q − 1 − factor j)/q, with R_0j = 1. */
function fillR(out: Float64Array, m: number, factor: number): void {
  for (let j = 0; j < m; j++) {
    out[j] = 1;
    for (let i = 1; i < m; i++) out[i * m + j] = out[(i - 1) * m + j] * (i - 1 - factor * j) / i;
  }
}
