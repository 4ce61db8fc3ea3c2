import type { Kernel } from "./kernel.ts";
import type { RateCoefficients } from "./rate_coefficients.ts";
import type { RosenbrockTableau } from "./rodas5p_tableau.ts";

/** The linear algebra of one Rosenbrock step: its arrays, and how the stages are filled. */
export class StageSolver {
  /** State at the start of the step. */
  readonly y: Float64Array;
  /** State at its end, after {@link attempt}. */
  readonly next: Float64Array;
  /** Stage vectors K_i; the last is the error estimate. */
  readonly stages: readonly Float64Array[];
  readonly #kernel: Kernel;
  readonly #tableau: RosenbrockTableau;
  readonly #coefficients: RateCoefficients;
  readonly #timeDerivative: Float64Array;
  readonly #kdot: Float64Array;

  /** @param kernel rates, Jacobian and factors
   * @param tableau the method
   * @param coefficients rate coefficients */
  constructor(kernel: Kernel, tableau: RosenbrockTableau, coefficients: RateCoefficients) {
    const n = kernel.size;
    this.#kernel = kernel;
    this.#tableau = tableau;
    this.#coefficients = coefficients;
    this.y = new Float64Array(n);
    this.next = new Float64Array(n);
    this.stages = tableau.a.map(() => new Float64Array(n));
    this.#timeDerivative = new Float64Array(n);
    this.#kdot = new Float64Array(kernel.reactionCount);
  }

  /** Evaluates the Jacobian, and ∂f/∂t, at the start of the step. */
  linearize(t: number): void {
    const coefficients = this.#coefficients;
    coefficients.at?.(t);
    this.#kernel.linearize(this.y, coefficients.k);
    if (coefficients.derivative) {
      coefficients.derivative(t, this.#kdot);
      this.#kernel.rightSide(this.y, this.#kdot, this.#timeDerivative);
    }
  }

  /** Fills the stages and `next`; false where the linear systems cannot be solved. */
  attempt(t: number, h: number): boolean {
    const { a, c, gamma, nodes, timeFactors } = this.#tableau;
    const { y, next, stages } = this;
    const kernel = this.#kernel;
    const coefficients = this.#coefficients;
    const k = coefficients.k;
    const changing = coefficients.at !== undefined;
    const timeDerivative = this.#timeDerivative;
    const n = y.length;
    if (!kernel.factor(1 / (h * gamma))) return false;
    const last = stages.length - 1;
    const perStep = 1 / h;
    for (let s = 0; s <= last; s++) {
      const stage = stages[s];
      // u = y + Σ a_sj K_j; the last two rows of a only add the stage before
      if (s === 0) next.set(y);
      else if (s < last - 1) combine(next, y, a[s], stages, 1);
      else {
        const before = stages[s - 1];
        for (let i = 0; i < n; i++) next[i] += before[i];
      }
      if (changing) coefficients.at!(t + nodes[s] * h);
      // b = Σ (c_sj/h) K_j + h d_s ∂f/∂t
      combine(stage, undefined, c[s], stages, perStep);
      if (changing && timeFactors[s] !== 0) {
        const factor = h * timeFactors[s];
        for (let i = 0; i < n; i++) stage[i] += factor * timeDerivative[i];
      }
      kernel.solveStage(next, k, stage);
    }
    const error = stages[last];
    for (let i = 0; i < n; i++) next[i] += error[i];
    return true;
  }
}

/** out = base + factor Σ w_j K_j, written out for each number of terms so that one pass is enough. */
function combine(
  out: Float64Array,
  base: Float64Array | undefined,
  w: readonly number[],
  stages: readonly Float64Array[],
  factor: number,
): void {
  const n = out.length;
  const count = w.length;
  if (base === undefined) {
    if (count === 0) {
      out.fill(0);
      return;
    }
    if (count < 4) {
      const s0 = stages[0], s1 = stages[1], s2 = stages[2];
      const w0 = factor * w[0];
      const w1 = count > 1 ? factor * w[1] : 0;
      const w2 = count > 2 ? factor * w[2] : 0;
      if (count === 1) { for (let i = 0; i < n; i++) out[i] = w0 * s0[i]; }
      else if (count === 2) { for (let i = 0; i < n; i++) out[i] = w0 * s0[i] + w1 * s1[i]; }
      else for (let i = 0; i < n; i++) out[i] = w0 * s0[i] + w1 * s1[i] + w2 * s2[i];
      return;
    }
    combineFour(out, undefined, w, stages, factor);
  } else {
    const s0 = stages[0], s1 = stages[1], s2 = stages[2];
    const w0 = factor * w[0], w1 = factor * w[1], w2 = factor * w[2];
    if (count === 1) { for (let i = 0; i < n; i++) out[i] = base[i] + w0 * s0[i]; }
    else if (count === 2) {
      for (let i = 0; i < n; i++) out[i] = base[i] + (w0 * s0[i] + w1 * s1[i]);
    } else if (count === 3) {
      for (let i = 0; i < n; i++) out[i] = base[i] + (w0 * s0[i] + w1 * s1[i] + w2 * s2[i]);
    } else combineFour(out, base, w, stages, factor);
  }
}

function combineFour(
  out: Float64Array,
  base: Float64Array | undefined,
  w: readonly number[],
  stages: readonly Float64Array[],
  factor: number,
): void {
  const n = out.length;
  const count = w.length;
  const s0 = stages[0], s1 = stages[1], s2 = stages[2], s3 = stages[3];
  const s4 = stages[4], s5 = stages[5], s6 = stages[6];
  const w0 = factor * w[0], w1 = factor * w[1], w2 = factor * w[2], w3 = factor * w[3];
  const w4 = count > 4 ? factor * w[4] : 0;
  const w5 = count > 5 ? factor * w[5] : 0;
  const w6 = count > 6 ? factor * w[6] : 0;
  if (base !== undefined) {
    if (count === 4) {
      for (let i = 0; i < n; i++) {
        out[i] = base[i] + (w0 * s0[i] + w1 * s1[i] + w2 * s2[i] + w3 * s3[i]);
      }
    } else {
      for (let i = 0; i < n; i++) {
        out[i] = base[i] + (w0 * s0[i] + w1 * s1[i] + w2 * s2[i] + w3 * s3[i] + w4 * s4[i]);
      }
    }
  } else if (count === 4) {
    for (let i = 0; i < n; i++) out[i] = w0 * s0[i] + w1 * s1[i] + w2 * s2[i] + w3 * s3[i];
  } else if (count === 5) {
    for (let i = 0; i < n; i++) {
      out[i] = w0 * s0[i] + w1 * s1[i] + w2 * s2[i] + w3 * s3[i] + w4 * s4[i];
    }
  } else if (count === 6) {
    for (let i = 0; i < n; i++) {
      out[i] = w0 * s0[i] + w1 * s1[i] + w2 * s2[i] + w3 * s3[i] + w4 * s4[i] + w5 * s5[i];
    }
  } else {
    for (let i = 0; i < n; i++) {
      out[i] = w0 * s0[i] + w1 * s1[i] + w2 * s2[i] + w3 * s3[i] + w4 * s4[i] + w5 * s5[i] +
        w6 * s6[i];
    }
  }
}
