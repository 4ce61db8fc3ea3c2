import { ALPHA, ERROR, GAMMA, MOST_ORDER, rescaling } from "./bdf_coefficients.ts";
import { close, totalOf } from "./closing_sums.ts";
import {
  type Integrator,
  type IntegratorCounts,
  isCollapsed,
  scaledError,
  type StepFailure,
  worstSpecies,
} from "./integrator.ts";
import type { Kernel } from "./kernel.ts";
import type { RateCoefficients } from "./rate_coefficients.ts";
import type { SensitivityHistory } from "./sensitivity_history.ts";

/** Most Newton iterations of a step. */
const MOST_ITERATIONS = 4;
/** Part of the tolerance that an unfinished Newton iteration may leave as an error. */
const NEWTON_SHARE = 0.05;
/** Steps after which the Jacobian is evaluated anew at the latest. */
const STEPS_PER_JACOBIAN = 40;
/** Least factor by which it pays to lengthen the step, as a new factorization comes with it. */
const WORTH_CHANGING = 1.2;

/** Backward (numerical) differentiation formulas of order 1 to 5 in backward differences, with
 * simplified Newton iterations on lagged factors of (α/h) I − J.
 *
 * Source: L. F. Shampine and M. W. Reichelt, SIAM J. Sci. Comput. 18 (1997) 1; the rate of
 * convergence kept from step to step as in P. N. Brown, G. D. Byrne and A. C. Hindmarsh, SIAM J.
 * Sci. Stat. Comput. 10 (1989) 1038. */
export class BackwardDifferentiation implements Integrator {
  readonly name = "bdf";
  readonly endsOnOutputs = false;
  readonly counts: IntegratorCounts = {
    accepted: 0,
    rejected: 0,
    rightSides: 0,
    jacobians: 0,
    factorizations: 0,
    solves: 0,
  };
  t = 0;
  tBefore = 0;
  stepSize = 0;
  readonly y: Float64Array;
  /** Sensitivities that are carried along. */
  readonly #sensitivities: SensitivityHistory | undefined;
  readonly #kernel: Kernel;
  readonly #totals: Float64Array;
  readonly #zeros: Float64Array;
  readonly #coefficients: RateCoefficients;
  readonly #rtol: number;
  readonly #atol: Float64Array;
  /** Backward differences ∇^0 y … ∇^(order + 2) y for the present step size. */
  readonly #differences: readonly Float64Array[];
  readonly #predicted: Float64Array;
  readonly #psi: Float64Array;
  readonly #correction: Float64Array;
  readonly #residual: Float64Array;
  readonly #trial: Float64Array;
  readonly #scratch: readonly Float64Array[];
  readonly #matrix = new Float64Array(36);
  readonly #matrices = new Float64Array(72);
  #order = 1;
  /** Size for which the differences hold. */
  #h = 0;
  /** Steps taken since size or order changed. */
  #equalSteps = 0;
  #factored = 0;
  #jacobianAge = 0;
  #jacobianFresh = false;
  #rate = 1;

  /** @param kernel the network's numbers
   * @param coefficients rate coefficients
   * @param rtol relative tolerance
   * @param atol absolute tolerance of each species, mol/L
   * @param sensitivities carried along, without part in the choice of steps */
  constructor(
    kernel: Kernel,
    coefficients: RateCoefficients,
    rtol: number,
    atol: Float64Array,
    sensitivities?: SensitivityHistory,
  ) {
    const n = kernel.size;
    const vector = () => new Float64Array(n);
    this.#kernel = kernel;
    this.#totals = new Float64Array(kernel.sums.length);
    this.#zeros = new Float64Array(kernel.sums.length);
    this.#coefficients = coefficients;
    this.#rtol = rtol;
    this.#atol = atol;
    this.#sensitivities = sensitivities;
    this.y = vector();
    this.#differences = Array.from({ length: MOST_ORDER + 3 }, vector);
    this.#predicted = vector();
    this.#psi = vector();
    this.#correction = vector();
    this.#residual = vector();
    this.#trial = vector();
    this.#scratch = Array.from({ length: MOST_ORDER + 1 }, vector);
  }

  start(t: number, y: Float64Array, stepSize: number): void {
    this.t = this.tBefore = t;
    this.y.set(y);
    this.#order = 1;
    this.#h = this.stepSize = stepSize;
    this.#equalSteps = 0;
    this.#factored = 0;
    this.#rate = 1;
    for (const difference of this.#differences) difference.fill(0);
    this.#differences[0].set(y);
    this.#kernel.sums.forEach((sum, s) => this.#totals[s] = totalOf(sum, y));
    this.#coefficients.at?.(t);
    this.#kernel.rightSide(this.y, this.#coefficients.k, this.#differences[1]);
    this.counts.rightSides++;
    const slope = this.#differences[1];
    for (let i = 0; i < slope.length; i++) slope[i] *= stepSize;
    if (this.#kernel.sums.length > 0) this.#close();
    if (this.#sensitivities) {
      this.#kernel.linearize(this.y, this.#coefficients.k);
      this.#sensitivities.start(t, this.y, stepSize);
    }
  }

  advance(limit: number): StepFailure | undefined {
    const { t, counts } = this;
    const rtol = this.#rtol;
    const atol = this.#atol;
    const left = limit - t;
    if (this.#h > left) this.#rescale(left / this.#h);
    while (true) {
      const h = this.#h;
      if (isCollapsed(t, h)) {
        return {
          what: `step size fell to ${h.toPrecision(3)} s`,
          species: worstSpecies(this.#correction, this.y, rtol, atol),
        };
      }
      const reaches = h >= 0.9999999 * left;
      const tNew = reaches ? limit : t + h;
      this.#predict();
      const c = ALPHA[this.#order] / h;
      if (this.#factored === 0 || this.#jacobianAge >= STEPS_PER_JACOBIAN) {
        if (!this.#refactor(tNew, c, true)) {
          counts.rejected++;
          this.#rescale(0.5);
          continue;
        }
      } else if (this.#factored !== c && !this.#refactor(tNew, c, true)) {
        counts.rejected++;
        this.#rescale(0.5);
        continue;
      }
      let converged = this.#newton(tNew, c);
      if (!converged && !this.#jacobianFresh && this.#refactor(tNew, c, true)) {
        converged = this.#newton(tNew, c);
      }
      if (!converged) {
        counts.rejected++;
        this.#rescale(0.3);
        continue;
      }
      const norm = ERROR[this.#order] *
        scaledError(this.#correction, this.y, this.#trial, rtol, atol);
      if (!(norm <= 1)) {
        counts.rejected++;
        const factor = 0.9 * Math.pow(norm, -1 / (this.#order + 1));
        this.#rescale(factor > 0.1 ? Math.min(factor, 0.9) : 0.1);
        continue;
      }
      counts.accepted++;
      this.tBefore = t;
      this.t = tNew;
      this.y.set(this.#trial);
      this.#jacobianAge++;
      this.#jacobianFresh = false;
      if (this.#sensitivities) {
        // the linear systems of the sensitivities need the Jacobian where the step ends
        this.#predicted.set(this.y);
        if (!this.#refactor(tNew, c, true)) {
          return { what: "the equations of the sensitivities are singular", species: -1 };
        }
        this.#sensitivities.step(tNew, this.y, this.#order, c);
      }
      this.#update();
      if (this.#kernel.sums.length > 0) {
        this.#close();
        this.y.set(this.#differences[0]);
      }
      if (++this.#equalSteps > this.#order) this.#choose(norm);
      this.stepSize = this.#h;
      return undefined;
    }
  }

  /** Sensitivities at a time within the last step, all parameters behind one another. */
  interpolateSensitivities(t: number, out: Float64Array): void {
    this.#sensitivities?.interpolate(t === this.t ? 0 : (this.t - t) / this.#h, this.#order, out);
  }

  interpolate(t: number, out: Float64Array): void {
    // the differences may already be those of the next step size: they describe the same polynomial
    const differences = this.#differences;
    const h = this.#h;
    out.set(differences[0]);
    let product = 1;
    for (let j = 1; j <= this.#order; j++) {
      product *= (t - (this.t - (j - 1) * h)) / (j * h);
      const difference = differences[j];
      for (let i = 0; i < out.length; i++) out[i] += product * difference[i];
    }
  }

  /** Conserved sums make the closing species of the state and, being 0, of its differences. */
  #close(): void {
    const { sums } = this.#kernel;
    const differences = this.#differences;
    close(sums, this.#totals, differences[0]);
    for (let j = 1; j < differences.length; j++) close(sums, this.#zeros, differences[j]);
  }

  #predict(): void {
    const order = this.#order;
    const differences = this.#differences;
    const predicted = this.#predicted;
    const psi = this.#psi;
    const n = predicted.length;
    const d0 = differences[0], d1 = differences[1];
    const perAlpha = 1 / ALPHA[order];
    const g1 = GAMMA[1] * perAlpha;
    for (let i = 0; i < n; i++) {
      predicted[i] = d0[i] + d1[i];
      psi[i] = g1 * d1[i];
    }
    for (let j = 2; j <= order; j++) {
      const d = differences[j];
      const g = GAMMA[j] * perAlpha;
      for (let i = 0; i < n; i++) {
        predicted[i] += d[i];
        psi[i] += g * d[i];
      }
    }
  }

  #refactor(t: number, c: number, evaluate: boolean): boolean {
    const { counts } = this;
    if (evaluate) {
      this.#coefficients.at?.(t);
      this.#kernel.linearize(this.#predicted, this.#coefficients.k);
      counts.jacobians++;
      this.#jacobianAge = 0;
      this.#jacobianFresh = true;
    }
    counts.factorizations++;
    this.#rate = 1;
    const done = this.#kernel.factor(c);
    this.#factored = done ? c : 0;
    return done;
  }

  /** Solves c (ψ + d) = f(y_predicted + d) for the correction d; whether it converged. */
  #newton(t: number, c: number): boolean {
    const kernel = this.#kernel;
    const k = this.#coefficients.k;
    const { counts } = this;
    const correction = this.#correction;
    const trial = this.#trial;
    const predicted = this.#predicted;
    const psi = this.#psi;
    const change = this.#residual;
    const n = trial.length;
    const share = NEWTON_SHARE / ERROR[this.#order];
    correction.fill(0);
    trial.set(predicted);
    this.#coefficients.at?.(t);
    let before = 0;
    for (let iteration = 0; iteration < MOST_ITERATIONS; iteration++) {
      for (let i = 0; i < n; i++) change[i] = -c * (psi[i] + correction[i]);
      kernel.solveStage(trial, k, change);
      counts.rightSides++;
      counts.solves++;
      const size = scaledError(change, predicted, trial, this.#rtol, this.#atol);
      if (!(size < Infinity)) return false;
      for (let i = 0; i < n; i++) {
        const d = correction[i] + change[i];
        correction[i] = d;
        trial[i] = predicted[i] + d;
      }
      if (iteration > 0) {
        const rate = size / before;
        if (rate > 2) return false;
        this.#rate = Math.max(0.3 * this.#rate, rate);
      }
      if (size * Math.min(1, 1.5 * this.#rate) <= share) return true;
      if (iteration > 0 && size / before >= 1) return false;
      before = size;
    }
    return false;
  }

  #update(): void {
    const order = this.#order;
    const differences = this.#differences;
    const correction = this.#correction;
    const n = correction.length;
    const high = differences[order + 2];
    const top = differences[order + 1];
    for (let i = 0; i < n; i++) {
      high[i] = correction[i] - top[i];
      top[i] = correction[i];
    }
    for (let j = order; j >= 0; j--) {
      const d = differences[j];
      const above = differences[j + 1];
      for (let i = 0; i < n; i++) d[i] += above[i];
    }
  }

  /** Chooses order and size from the errors that the orders beside the present one would make. */
  #choose(norm: number): void {
    const order = this.#order;
    const y = this.y;
    const rtol = this.#rtol;
    const atol = this.#atol;
    const differences = this.#differences;
    const lower = order > 1
      ? ERROR[order - 1] * scaledError(differences[order], y, y, rtol, atol)
      : Infinity;
    const higher = order < MOST_ORDER
      ? ERROR[order + 1] * scaledError(differences[order + 2], y, y, rtol, atol)
      : Infinity;
    const factors = [
      0.85 * Math.pow(lower, -1 / order),
      0.9 * Math.pow(norm, -1 / (order + 1)),
      0.85 * Math.pow(higher, -1 / (order + 2)),
    ];
    let best = 1;
    if (factors[0] > factors[best]) best = 0;
    if (factors[2] > factors[best]) best = 2;
    const factor = Math.min(10, factors[best]);
    if (factor < WORTH_CHANGING && factor > 0.9) return;
    this.#order += best - 1;
    this.#rescale(Math.max(0.5, factor));
  }

  #rescale(factor: number): void {
    const m = this.#order + 1;
    const matrix = this.#matrix;
    rescaling(this.#order, factor, matrix, this.#matrices);
    const differences = this.#differences;
    const scratch = this.#scratch;
    const n = this.y.length;
    for (let j = 1; j < m; j++) {
      const out = scratch[j];
      out.fill(0);
      for (let q = 1; q < m; q++) {
        const weight = matrix[q * m + j];
        if (weight === 0) continue;
        const difference = differences[q];
        for (let i = 0; i < n; i++) out[i] += weight * difference[i];
      }
    }
    for (let j = 1; j < m; j++) differences[j].set(scratch[j]);
    this.#sensitivities?.rescale(this.#order, factor);
    this.#h *= factor;
    this.#equalSteps = 0;
  }
}
