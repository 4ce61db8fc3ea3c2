import { ALPHA, GAMMA, MOST_ORDER } from "./bdf_coefficients.ts";
import type { Kernel } from "./kernel.ts";
import type { Reaction } from "./reaction_network.ts";

/** A parameter p of a network: how the rate coefficients and the state at the start depend on it. */
export interface Parameter {
  /** Reactions whose coefficient depends on it. */
  readonly reactions: readonly number[];
  /** ∂k_j/∂p for each of them; may be set anew as time goes on. */
  readonly factors: Float64Array;
  /** Species whose concentration at the start it is, in the kernel's numbering; −1 if none. */
  readonly species: number;
}

/** Values kept: the newest, and as many before it as the highest order and a change to it need. */
const KEPT = MOST_ORDER + 2;

/** Sensitivities S = ∂y/∂p carried along by backward differentiation, one linear system a parameter and
 * step with the factors of the state:
 *
 * (α/h I − J) S = (α/h) Σ_j (1 − γ_j/α) ∇^j S_before + ∂f/∂p
 *
 * The last values at equal steps are kept rather than their differences, so that a step reads each of
 * them once and moves none. All parameters lie behind one another in one array.
 *
 * Source: staggered direct method, M. Caracotsios and W. E. Stewart, Comput. Chem. Eng. 9 (1985) 359. */
export class SensitivityHistory {
  /** Set by whoever changes {@link Parameter.factors} in time; called before they are used. */
  update: ((t: number) => void) | undefined;
  readonly #kernel: Kernel;
  readonly #parameters: readonly Parameter[];
  readonly #reactions: readonly Pick<Reaction, "changed" | "change">[];
  /** The newest value first. */
  #history: Float64Array[];
  readonly #spare: Float64Array[];
  readonly #views = new Map<Float64Array, readonly Float64Array[]>();
  readonly #unitRates: Float64Array;
  readonly #ones: Float64Array;
  readonly #weights = new Float64Array(KEPT);
  #begun = false;

  /** @param kernel the kernel of the state, whose factors are used
   * @param reactions the network's reactions
   * @param parameters what is varied */
  constructor(
    kernel: Kernel,
    reactions: readonly Pick<Reaction, "changed" | "change">[],
    parameters: readonly Parameter[],
  ) {
    const n = kernel.size;
    const vector = () => {
      const all = new Float64Array(n * parameters.length);
      this.#views.set(all, parameters.map((_, q) => all.subarray(q * n, (q + 1) * n)));
      return all;
    };
    this.#kernel = kernel;
    this.#reactions = reactions;
    this.#parameters = parameters;
    this.#history = Array.from({ length: KEPT }, vector);
    this.#spare = Array.from({ length: MOST_ORDER }, vector);
    this.#unitRates = new Float64Array(kernel.reactionCount);
    this.#ones = new Float64Array(kernel.reactionCount).fill(1);
  }

  /** Begins with step size h at a state for which the kernel holds the Jacobian; when begun again, as
   * after a bend of the coefficients, the sensitivities go on from where they are. */
  start(t: number, y: Float64Array, h: number): void {
    const [now, before] = this.#history;
    const first = !this.#begun;
    this.#begun = true;
    const slope = this.#spare[0];
    slope.fill(0);
    this.#addParameterDerivatives(t, y, slope);
    const product = new Float64Array(this.#kernel.size);
    this.#parameters.forEach(({ species }, q) => {
      const own = this.#views.get(now)![q];
      if (first && species >= 0) own[species] = 1;
      this.#kernel.timesJacobian(own, product);
      const ownSlope = this.#views.get(slope)![q];
      const ownBefore = this.#views.get(before)![q];
      for (let i = 0; i < own.length; i++) ownBefore[i] = own[i] - h * (product[i] + ownSlope[i]);
    });
  }

  /** Takes the step that the state has taken, c = α/h; the kernel holds the factors at its end. */
  step(t: number, y: Float64Array, order: number, c: number): void {
    const weights = this.#weights;
    // ∇^j S = Σ_m (−1)^m binomial(j, m) S_m
    weights.fill(0);
    for (let j = 0; j <= order; j++) {
      const factor = c * (1 - GAMMA[j] / ALPHA[order]);
      for (let m = 0, binomial = 1; m <= j; m++) {
        weights[m] += factor * binomial;
        binomial *= -(j - m) / (m + 1);
      }
    }
    const history = this.#history;
    const next = history[KEPT - 1]; // the oldest value is not needed: order + 1 < KEPT
    weightedSum(next, history, weights, order + 1);
    this.#addParameterDerivatives(t, y, next);
    for (const view of this.#views.get(next)!) this.#kernel.solve(view);
    for (let m = KEPT - 1; m > 0; m--) history[m] = history[m - 1];
    history[0] = next;
  }

  /** Passes to a step size `factor` times the present one: values at the new points from the polynomial
   * of degree `order` through those at the old ones. */
  rescale(order: number, factor: number): void {
    const history = this.#history;
    const weights = this.#weights;
    for (let j = 1; j <= order; j++) {
      lagrange(weights, order, j * factor);
      weightedSum(this.#spare[j - 1], history, weights, order + 1);
    }
    for (let j = 1; j <= order; j++) {
      const old = history[j];
      history[j] = this.#spare[j - 1];
      this.#spare[j - 1] = old;
    }
  }

  /** Sensitivities at a time `back` steps of the present size before the end, all parameters behind
   * one another. */
  interpolate(back: number, order: number, out: Float64Array): void {
    lagrange(this.#weights, order, back);
    weightedSum(out, this.#history, this.#weights, order + 1);
  }

  /** Adds ∂f/∂p = Σ_j ν_j (∂k_j/∂p) ∏ y to an array of all parameters. */
  #addParameterDerivatives(t: number, y: Float64Array, out: Float64Array): void {
    this.update?.(t);
    const rates = this.#unitRates;
    const views = this.#views.get(out)!;
    this.#kernel.rates(y, this.#ones, rates);
    for (let q = 0; q < this.#parameters.length; q++) {
      const { reactions, factors } = this.#parameters[q];
      const view = views[q];
      for (let r = 0; r < reactions.length; r++) {
        const j = reactions[r];
        const rate = factors[r] * rates[j];
        const { changed, change } = this.#reactions[j];
        for (let a = 0; a < changed.length; a++) view[changed[a]] += change[a] * rate;
      }
    }
  }
}

/** Weights of the values at 0, −1 … −order for the value at −back of the polynomial through them. */
function lagrange(weights: Float64Array, order: number, back: number): void {
  for (let q = 0; q <= order; q++) {
    let weight = 1;
    for (let r = 0; r <= order; r++) if (r !== q) weight *= (back - r) / (q - r);
    weights[q] = weight;
  }
}

/** out = Σ w_m v_m over the first `count` (2 to 6) vectors. */
function weightedSum(
  out: Float64Array,
  vectors: readonly Float64Array[],
  w: Float64Array,
  count: number,
): void {
  const [v0, v1, v2, v3, v4, v5] = vectors;
  const w0 = w[0], w1 = w[1], w2 = w[2], w3 = w[3], w4 = w[4], w5 = w[5];
  const n = out.length;
  if (count === 2) { for (let i = 0; i < n; i++) out[i] = w0 * v0[i] + w1 * v1[i]; }
  else if (count === 3) {
    for (let i = 0; i < n; i++) {
      out[i] = w0 * v0[i] + w1 * v1[i] + w2 * v2[i];
    }
  } else if (count === 4) {
    for (let i = 0; i < n; i++) out[i] = w0 * v0[i] + w1 * v1[i] + (w2 * v2[i] + w3 * v3[i]);
  } else if (count === 5) {
    for (let i = 0; i < n; i++) {
      out[i] = w0 * v0[i] + w1 * v1[i] + (w2 * v2[i] + w3 * v3[i]) + w4 * v4[i];
    }
  } else {
    for (let i = 0; i < n; i++) {
      out[i] = w0 * v0[i] + w1 * v1[i] + (w2 * v2[i] + w3 * v3[i]) + (w4 * v4[i] + w5 * v5[i]);
    }
  }
}
