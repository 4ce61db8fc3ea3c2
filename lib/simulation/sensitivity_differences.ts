import { ALPHA, GAMMA, MOST_ORDER } from "./bdf_coefficients.ts";
import type { Kernel } from "./kernel.ts";

/** A parameter p of a network: how the rate coefficients and the state at the start depend on it. */
export interface Parameter {
  /** Reactions whose coefficient depends on it. */
  readonly reactions: readonly number[];
  /** ∂k_j/∂p for each of them; may be set anew as time goes on. */
  readonly factors: Float64Array;
  /** Species whose concentration at the start it is, in the kernel's numbering; −1 if none. */
  readonly species: number;
}

/** Sensitivities S = ∂y/∂p carried along by backward differentiation, one linear system a parameter and
 * step with the factors of the state:
 *
 * (α/h I − J) S = (α/h) (S_predicted − ψ) + ∂f/∂p
 *
 * The differences of all parameters lie behind one another in one array for each order.
 *
 * Source: staggered direct method, M. Caracotsios and W. E. Stewart, Comput. Chem. Eng. 9 (1985) 359. */
export class SensitivityDifferences {
  /** Set by whoever changes {@link Parameter.factors} in time; called before they are used. */
  update: ((t: number) => void) | undefined;
  readonly #kernel: Kernel;
  readonly #parameters: readonly Parameter[];
  readonly #network: readonly { changed: readonly number[]; change: readonly number[] }[];
  readonly #differences: readonly Float64Array[];
  readonly #unknown: Float64Array;
  readonly #views: readonly Float64Array[];
  readonly #unitRates: Float64Array;
  readonly #ones: Float64Array;
  readonly #scratch: readonly Float64Array[];
  #begun = false;

  /** @param kernel the kernel of the state, whose factors are used
   * @param reactions the network's reactions
   * @param parameters what is varied */
  constructor(
    kernel: Kernel,
    reactions: readonly { changed: readonly number[]; change: readonly number[] }[],
    parameters: readonly Parameter[],
  ) {
    const n = kernel.size;
    const length = n * parameters.length;
    const vector = () => new Float64Array(length);
    this.#kernel = kernel;
    this.#network = reactions;
    this.#parameters = parameters;
    this.#differences = Array.from({ length: MOST_ORDER + 3 }, vector);
    this.#scratch = Array.from({ length: MOST_ORDER + 1 }, vector);
    this.#unknown = vector();
    this.#views = parameters.map((_, q) => this.#unknown.subarray(q * n, (q + 1) * n));
    this.#unitRates = new Float64Array(kernel.reactionCount);
    this.#ones = new Float64Array(kernel.reactionCount).fill(1);
  }

  /** Begins with step size h at a state for which the kernel holds the Jacobian; when begun again, as
   * after a bend of the coefficients, the sensitivities go on from where they are. */
  start(t: number, y: Float64Array, h: number): void {
    const n = this.#kernel.size;
    const [values, slopes] = this.#differences;
    for (let j = 1; j < this.#differences.length; j++) this.#differences[j].fill(0);
    const first = !this.#begun;
    this.#begun = true;
    this.#unknown.fill(0);
    this.#addParameterDerivatives(t, y);
    const product = new Float64Array(n);
    this.#parameters.forEach(({ species }, q) => {
      const own = values.subarray(q * n, (q + 1) * n);
      if (first && species >= 0) own[species] = 1;
      this.#kernel.timesJacobian(own, product);
      for (let i = 0; i < n; i++) slopes[q * n + i] = h * (product[i] + this.#views[q][i]);
    });
  }

  /** Takes the step that the state has taken, c = α/h; the kernel holds the factors at its end. */
  step(t: number, y: Float64Array, order: number, c: number): void {
    predictedRightSide(this.#differences, this.#unknown, order, c);
    this.#addParameterDerivatives(t, y);
    for (let q = 0; q < this.#views.length; q++) this.#kernel.solve(this.#views[q]);
    takeStep(this.#differences, this.#unknown, order);
  }

  /** Passes to another step size with the matrix of the state's differences. */
  rescale(order: number, matrix: Float64Array): void {
    const m = order + 1;
    const length = this.#unknown.length;
    for (let j = 1; j < m; j++) {
      const out = this.#scratch[j];
      out.fill(0);
      for (let q = 1; q < m; q++) {
        const weight = matrix[q * m + j];
        if (weight === 0) continue;
        const difference = this.#differences[q];
        for (let i = 0; i < length; i++) out[i] += weight * difference[i];
      }
    }
    for (let j = 1; j < m; j++) this.#differences[j].set(this.#scratch[j]);
  }

  /** Sensitivities at a time `back` steps of the present size before the end, all parameters behind
   * one another. */
  interpolate(back: number, order: number, out: Float64Array): void {
    out.set(this.#differences[0]);
    let product = 1;
    for (let j = 1; j <= order; j++) {
      product *= (j - 1 - back) / j;
      const difference = this.#differences[j];
      for (let i = 0; i < out.length; i++) out[i] += product * difference[i];
    }
  }

  /** Adds ∂f/∂p = Σ_j ν_j (∂k_j/∂p) ∏ y to the right sides. */
  #addParameterDerivatives(t: number, y: Float64Array): void {
    this.update?.(t);
    const rates = this.#unitRates;
    this.#kernel.rates(y, this.#ones, rates);
    for (let q = 0; q < this.#parameters.length; q++) {
      const { reactions, factors } = this.#parameters[q];
      const view = this.#views[q];
      for (let r = 0; r < reactions.length; r++) {
        const j = reactions[r];
        const rate = factors[r] * rates[j];
        const { changed, change } = this.#network[j];
        for (let a = 0; a < changed.length; a++) view[changed[a]] += change[a] * rate;
      }
    }
  }
}

/** out = c Σ_j (1 − γ_j/α) ∇^j S, the right side without ∂f/∂p. */
function predictedRightSide(
  differences: readonly Float64Array[],
  out: Float64Array,
  order: number,
  c: number,
): void {
  const [d0, d1, d2, d3, d4, d5] = differences;
  const weight = (j: number) => j <= order ? c * (1 - GAMMA[j] / ALPHA[order]) : 0;
  const w1 = weight(1), w2 = weight(2), w3 = weight(3), w4 = weight(4), w5 = weight(5);
  const n = out.length;
  if (order === 1) { for (let i = 0; i < n; i++) out[i] = c * d0[i] + w1 * d1[i]; }
  else if (order === 2) {
    for (let i = 0; i < n; i++) {
      out[i] = c * d0[i] + w1 * d1[i] + w2 * d2[i];
    }
  } else if (order === 3) {
    for (let i = 0; i < n; i++) out[i] = c * d0[i] + w1 * d1[i] + w2 * d2[i] + w3 * d3[i];
  } else if (order === 4) {
    for (let i = 0; i < n; i++) {
      out[i] = c * d0[i] + w1 * d1[i] + w2 * d2[i] + w3 * d3[i] + w4 * d4[i];
    }
  } else {
    for (let i = 0; i < n; i++) {
      out[i] = c * d0[i] + w1 * d1[i] + w2 * d2[i] + w3 * d3[i] + w4 * d4[i] + w5 * d5[i];
    }
  }
}

/** The differences after a step to the new values: the correction d = S − Σ ∇^j S becomes
 * ∇^(order+1), and each lower one gains the new one above it. */
function takeStep(
  differences: readonly Float64Array[],
  values: Float64Array,
  order: number,
): void {
  const [d0, d1, d2, d3, d4, d5] = differences;
  const top = differences[order + 1];
  const high = differences[order + 2];
  const n = values.length;
  for (let i = 0; i < n; i++) {
    const v0 = d0[i], v1 = d1[i];
    const v2 = order > 1 ? d2[i] : 0;
    const v3 = order > 2 ? d3[i] : 0;
    const v4 = order > 3 ? d4[i] : 0;
    const v5 = order > 4 ? d5[i] : 0;
    let sum = values[i] - (v0 + v1 + v2 + v3 + v4 + v5);
    high[i] = sum - top[i];
    top[i] = sum;
    if (order > 4) d5[i] = sum += v5;
    if (order > 3) d4[i] = sum += v4;
    if (order > 2) d3[i] = sum += v3;
    if (order > 1) d2[i] = sum += v2;
    d1[i] = sum += v1;
    d0[i] = sum + v0;
  }
}
