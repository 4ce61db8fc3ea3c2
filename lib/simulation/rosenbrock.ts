import { close, type ClosingSum, totalOf } from "./closing_sums.ts";
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
import { RODAS5P } from "./rodas5p_tableau.ts";
import { StageSolver } from "./stage_solver.ts";
import { StepController } from "./step_controller.ts";

/** Rosenbrock method Rodas5P with step control and dense output.
 *
 * Source: see {@link RODAS5P}; E. Hairer and G. Wanner, Solving ordinary differential equations II,
 * 2nd ed., Springer 1996, sec. IV.7. */
export class Rosenbrock implements Integrator {
  readonly name = "rosenbrock";
  readonly endsOnOutputs = true;
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
  readonly #solver: StageSolver;
  readonly #controller = new StepController(RODAS5P.embeddedOrder);
  readonly #sums: readonly ClosingSum[];
  readonly #totals: Float64Array;
  readonly #rtol: number;
  readonly #atol: Float64Array;
  readonly #dense: readonly Float64Array[];
  #denseReady = false;

  /** @param kernel the network's numbers
   * @param coefficients rate coefficients
   * @param rtol relative tolerance
   * @param atol absolute tolerance of each species, mol/L */
  constructor(kernel: Kernel, coefficients: RateCoefficients, rtol: number, atol: Float64Array) {
    this.#solver = new StageSolver(kernel, RODAS5P, coefficients);
    this.#sums = kernel.sums;
    this.#totals = new Float64Array(kernel.sums.length);
    this.#rtol = rtol;
    this.#atol = atol;
    this.#dense = RODAS5P.dense.map(() => new Float64Array(kernel.size));
  }

  get y(): Float64Array {
    return this.#solver.next;
  }

  start(t: number, y: Float64Array, stepSize: number): void {
    this.t = this.tBefore = t;
    this.stepSize = stepSize;
    this.#solver.next.set(y);
    this.#sums.forEach((sum, s) => this.#totals[s] = totalOf(sum, y));
    this.#controller.restart();
  }

  advance(limit: number): StepFailure | undefined {
    const solver = this.#solver;
    const { y, next, stages } = solver;
    const counts = this.counts;
    const t = this.t;
    const error = stages[stages.length - 1];
    y.set(next);
    solver.linearize(t);
    counts.jacobians++;
    while (true) {
      const wanted = this.stepSize;
      let h = wanted;
      const left = limit - t;
      const reaches = h > 0.9999 * left;
      if (reaches) h = left;
      else if (h > 0.5 * left) h = 0.5 * left;
      if (isCollapsed(t, h)) {
        const species = worstSpecies(error, y, this.#rtol, this.#atol);
        next.set(y);
        return { what: `step size fell to ${h.toPrecision(3)} s`, species };
      }
      counts.factorizations++;
      counts.rightSides += stages.length;
      counts.solves += stages.length;
      const solved = solver.attempt(t, h);
      const norm = solved ? scaledError(error, y, next, this.#rtol, this.#atol) : NaN;
      if (norm <= 1) {
        counts.accepted++;
        if (this.#sums.length > 0) close(this.#sums, this.#totals, next);
        this.tBefore = t;
        this.t = reaches ? limit : t + h;
        // a step cut short by the limit says little about how far the next may go
        this.stepSize = h < 0.99 * wanted ? wanted : this.#controller.accepted(norm, h);
        this.#denseReady = false;
        return undefined;
      }
      counts.rejected++;
      this.stepSize = this.#controller.rejected(norm, h);
    }
  }

  interpolate(t: number, out: Float64Array): void {
    const { y, next, stages } = this.#solver;
    const [p1, p2, p3] = this.#dense;
    const n = out.length;
    if (!this.#denseReady) {
      for (let r = 0; r < 3; r++) {
        const weights = RODAS5P.dense[r];
        const polynomial = this.#dense[r];
        polynomial.fill(0);
        for (let j = 0; j < stages.length; j++) {
          const w = weights[j];
          const stage = stages[j];
          for (let i = 0; i < n; i++) polynomial[i] += w * stage[i];
        }
      }
      this.#denseReady = true;
    }
    const theta = (t - this.tBefore) / (this.t - this.tBefore);
    const rest = 1 - theta;
    for (let i = 0; i < n; i++) {
      out[i] = rest * y[i] +
        theta * (next[i] + rest * (p1[i] + theta * (p2[i] + theta * p3[i])));
    }
  }
}
