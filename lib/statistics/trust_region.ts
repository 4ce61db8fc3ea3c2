import type { JacobianFunction, ResidualFunction } from "./numeric_jacobian.ts";
import { dampedStep, dampingFor, reduceSystem, type SingularSystem } from "./singular_system.ts";

/** A least-squares problem: residuals already weighted, so that their sum of squares is minimised. */
export interface LeastSquaresProblem {
  /** Number of residuals. */
  readonly count: number;
  /** Residuals at a point. */
  readonly residuals: ResidualFunction;
  /** Their Jacobian. */
  readonly jacobian: JacobianFunction;
  /** Starting point. */
  readonly start: Float64Array;
  /** Lower and upper bounds, infinite where there are none. */
  readonly lower: Float64Array;
  readonly upper: Float64Array;
}

/** When to stop. */
export interface StoppingOptions {
  /** Most iterations. */
  readonly maxIterations: number;
  /** Aborts between iterations. */
  readonly signal?: AbortSignal;
  /** First trust radius as a multiple of the scaled size of the start.
   * @default {0.1} */
  readonly firstRadius?: number;
}

/** Where a minimisation ended. */
export interface Minimum {
  /** Best point found. */
  readonly parameters: Float64Array;
  /** Residuals there. */
  readonly residuals: Float64Array;
  /** The linearised system there, over the free parameters only. */
  readonly system: SingularSystem;
  /** Which parameters were free, i.e. not held at a bound. */
  readonly free: readonly number[];
  /** Whether the point is a minimum. */
  readonly converged: boolean;
  /** Why the search ended, in words. */
  readonly reason: string;
  /** Iterations taken. */
  readonly iterations: number;
}

/** The relative offset at which a minimum is reached: the Gauss–Newton step is then this small a
 * share of the standard errors. Source: D. M. Bates & D. G. Watts, Technometrics 23 (1981) 179. */
const RELATIVE_OFFSET = 1e-8;

/** An offset that is good enough when rounding allows no better. */
const ROUNDING_OFFSET = 1e-4;

/** Most steps taken on trust where rounding hides whether they lower the sum of squares. */
const MOST_POLISHING = 4;

/** Singular values below this share of the largest take no part in a step. */
const STEP_TOLERANCE = 1e-15;

/** Scale of a column that is zero. */
const SHORTEST = 1e-300;

/** First trust radius over the scaled size of the start: small, since a first leap along a badly
 * scaled start can end on a plateau. */
const FIRST_RADIUS = 0.1;

/** Minimises a sum of squares by the Levenberg–Marquardt method as a trust region: the step is the
 * best one of scaled length at most Δ, and Δ follows how well the linear model foretold the result.
 * Parameters at a bound whose step points outward are held there for that iteration.
 *
 * Source: K. Levenberg, Q. Appl. Math. 2 (1944) 164; D. W. Marquardt, J. SIAM 11 (1963) 431;
 * J. J. Moré, Lect. Notes Math. 630 (1978) 105.
 *
 * @throws {RangeError} if the residuals at the start are not finite */
export function minimizeSquares(problem: LeastSquaresProblem, stop: StoppingOptions): Minimum {
  const { count, lower, upper } = problem;
  const n = problem.start.length;
  const at = Float64Array.from(problem.start);
  const trial = new Float64Array(n);
  const step = new Float64Array(n);
  let residuals = new Float64Array(count);
  let trialResiduals = new Float64Array(count);
  const jacobian = new Float64Array(count * n);
  const scale = new Float64Array(n);
  problem.residuals(at, residuals);
  let square = sumOfSquares(residuals);
  if (!Number.isFinite(square)) {
    throw new RangeError(
      `Cannot start a least-squares fit at [${
        [...at].join(", ")
      }]: the model gives a residual that ` +
        `is not finite; start elsewhere or set bounds`,
    );
  }
  let radius = NaN;
  let polished = 0;
  for (let iteration = 0;; iteration++) {
    problem.jacobian(at, jacobian);
    growScale(jacobian, scale, count);
    const free = freeParameters(jacobian, residuals, at, lower, upper);
    const system = freeSystem(jacobian, residuals, scale, free, STEP_TOLERANCE);
    // Columns of unit length: what the data determine must not hang on where the search has been.
    const lengths = columnLengths(jacobian, n, count);
    const here = freeSystem(jacobian, residuals, lengths, free);
    const end = (converged: boolean, reason: string): Minimum => ({
      parameters: at,
      residuals,
      system: here,
      free,
      converged,
      reason,
      iterations: iteration,
    });
    const offset = relativeOffset(here, count);
    if (!jacobian.every(Number.isFinite)) {
      return end(false, "the derivatives of the model are not finite at the best point");
    }
    if (offset <= RELATIVE_OFFSET) return end(true, "the relative offset criterion is met");
    if (square <= vanishing(problem, lengths, at)) return end(true, "the residuals vanish");
    if (stop.signal?.aborted) return end(false, "aborted before convergence");
    if (iteration >= stop.maxIterations) {
      return end(false, `not converged in ${stop.maxIterations} iterations`);
    }
    if (Number.isNaN(radius)) radius = firstRadius(scale, at, stop.firstRadius ?? FIRST_RADIUS);
    // Shrink the region until a step lowers the sum of squares.
    for (;;) {
      const freeStep = new Float64Array(free.length);
      const damping = dampingFor(system, radius);
      const length = dampedStep(system, damping, freeStep);
      step.fill(0);
      free.forEach((j, k) => step[j] = freeStep[k]);
      let moved = false;
      for (let j = 0; j < n; j++) {
        trial[j] = Math.min(Math.max(at[j] + step[j], lower[j]), upper[j]);
        moved ||= trial[j] !== at[j];
      }
      const predicted = predictedDecrease(jacobian, residuals, at, trial);
      problem.residuals(trial, trialResiduals);
      const trialSquare = sumOfSquares(trialResiduals);
      const actual = square - trialSquare;
      const ratio = predicted > 0 ? actual / predicted : actual > 0 ? 1 : -1;
      // Below rounding the sum of squares cannot judge a step, but the step still improves the point.
      const unresolved = offset <= ROUNDING_OFFSET && moved && polished < MOST_POLISHING &&
        Math.abs(predicted) <= 64 * Number.EPSILON * square &&
        Math.abs(actual) <= 64 * Number.EPSILON * square;
      if (unresolved) polished++;
      if (unresolved || (Number.isFinite(trialSquare) && actual > 0 && ratio > 1e-4)) {
        if (!unresolved && ratio < 0.25) radius = Math.min(radius, length) / 4;
        else if (ratio > 0.75 && damping > 0) radius *= 2;
        at.set(trial);
        [residuals, trialResiduals] = [trialResiduals, residuals];
        square = trialSquare;
        break;
      }
      radius = Math.min(radius, length) / 4;
      if (!moved || !(radius > Number.EPSILON * 1e-3 * scaledSize(scale, at))) {
        const fine = offset <= ROUNDING_OFFSET;
        return end(
          fine,
          fine
            ? "the smallest sum of squares that rounding allows is reached"
            : `no step lowers the sum of squares any further (relative offset ${
              offset.toExponential(1)
            })`,
        );
      }
    }
  }
}

function sumOfSquares(values: Float64Array): number {
  let sum = 0;
  for (const value of values) sum += value * value;
  return sum;
}

/** Column lengths, never shrinking: Moré's scaling, independent of the parameters' units. */
function growScale(jacobian: Float64Array, scale: Float64Array, count: number): void {
  const n = scale.length;
  const lengths = columnLengths(jacobian, n, count);
  for (let j = 0; j < n; j++) scale[j] = Math.max(scale[j], lengths[j]);
}

/** Length of each column; a tiny number in place of 0. */
function columnLengths(jacobian: Float64Array, n: number, count: number): Float64Array {
  return Float64Array.from({ length: n }, (_, j) => {
    let square = 0;
    for (let i = 0; i < count; i++) square += jacobian[i * n + j] ** 2;
    return Math.max(Math.sqrt(square), SHORTEST);
  });
}

/** Parameters that may move: not at a bound with the sum of squares falling outward. */
function freeParameters(
  jacobian: Float64Array,
  residuals: Float64Array,
  at: Float64Array,
  lower: Float64Array,
  upper: Float64Array,
): number[] {
  const n = at.length;
  const free: number[] = [];
  for (let j = 0; j < n; j++) {
    let gradient = 0;
    for (let i = 0; i < residuals.length; i++) gradient += jacobian[i * n + j] * residuals[i];
    const held = (at[j] <= lower[j] && gradient >= 0) || (at[j] >= upper[j] && gradient <= 0);
    if (!held) free.push(j);
  }
  return free;
}

/** The linearised system over the parameters that may move. */
function freeSystem(
  jacobian: Float64Array,
  residuals: Float64Array,
  scale: Float64Array,
  free: readonly number[],
  tolerance?: number,
): SingularSystem {
  const n = scale.length;
  const columns = new Float64Array(residuals.length * free.length);
  for (let i = 0; i < residuals.length; i++) {
    free.forEach((j, k) => columns[i * free.length + k] = jacobian[i * n + j]);
  }
  const freeScale = Float64Array.from(free, (j) => scale[j]);
  return reduceSystem(columns, residuals, freeScale, tolerance);
}

/** Tangent-plane part of the residual over the part across it, each per degree of freedom. */
function relativeOffset(system: SingularSystem, count: number): number {
  const p = system.rank;
  if (p === 0) return 0;
  let along = 0;
  for (let k = 0; k < p; k++) along += system.projection[k] ** 2;
  const across = Math.max(system.sumOfSquares - system.reachable, 0);
  if (count <= p || across === 0) return along === 0 ? 0 : Infinity;
  return Math.sqrt((along / p) / (across / (count - p)));
}

/** Below this sum of squares the fit goes through every point to rounding. */
function vanishing(problem: LeastSquaresProblem, scale: Float64Array, at: Float64Array): number {
  return problem.count * (Number.EPSILON * scaledSize(scale, at)) ** 2 / 16;
}

function scaledSize(scale: Float64Array, at: Float64Array): number {
  let sum = 0;
  for (let j = 0; j < at.length; j++) sum += (scale[j] * at[j]) ** 2;
  return Math.sqrt(sum);
}

function firstRadius(scale: Float64Array, at: Float64Array, factor: number): number {
  const size = scaledSize(scale, at);
  return factor * (size > 0 ? size : 1);
}

/** ‖r‖² − ‖r + J s‖² for the step that is really taken, bounds included. */
function predictedDecrease(
  jacobian: Float64Array,
  residuals: Float64Array,
  at: Float64Array,
  trial: Float64Array,
): number {
  const n = at.length;
  let decrease = 0;
  for (let i = 0; i < residuals.length; i++) {
    let change = 0;
    for (let j = 0; j < n; j++) change += jacobian[i * n + j] * (trial[j] - at[j]);
    decrease -= change * (2 * residuals[i] + change);
  }
  return decrease;
}
