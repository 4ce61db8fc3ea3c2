import type { Caution } from "../quantity/caution.ts";
import { parameterCovariance } from "./covariance.ts";
import {
  type JacobianFunction,
  numericJacobian,
  type ResidualFunction,
} from "./numeric_jacobian.ts";
import { minimizeSquares } from "./trust_region.ts";

/** A least-squares fit to set up: weighted residuals as a function of named parameters. */
export interface FitProblem {
  /** Names of the parameters. */
  readonly names: readonly string[];
  /** Number of residuals. */
  readonly count: number;
  /** Weighted residuals. */
  readonly residuals: ResidualFunction;
  /** Their Jacobian; by central differences where left out. */
  readonly jacobian?: JacobianFunction;
  /** Starting values. */
  readonly start: readonly number[];
  /** Bounds, infinite where left out. */
  readonly bounds?: readonly (readonly [number, number] | undefined)[];
  /** Variance of a residual: "estimated" from the residuals, or known (1 for residuals divided by
   * their standard uncertainty).
   * @default {"estimated"} */
  readonly variance?: "estimated" | number;
  /** Most iterations.
   * @default {1000} */
  readonly maxIterations?: number;
  /** Aborts the search. */
  readonly signal?: AbortSignal;
}

/** A finished (or honestly unfinished) least-squares fit. */
export interface FitOutcome {
  /** Parameters at the best point. */
  readonly parameters: number[];
  /** Their covariance; `NaN` where not determined or not converged. */
  readonly covariance: number[][];
  /** Weighted residuals at the best point. */
  readonly residuals: Float64Array;
  /** Sum of squares of the weighted residuals. */
  readonly residualSumOfSquares: number;
  /** Residuals less parameters. */
  readonly degreesOfFreedom: number;
  /** Variance of a residual of unit weight that went into the covariance. */
  readonly variance: number;
  /** Whether a minimum was reached. */
  readonly converged: boolean;
  /** Why the search ended. */
  readonly reason: string;
  /** Iterations taken. */
  readonly iterations: number;
  /** Not converged, at a bound, not identifiable. */
  readonly cautions: readonly Caution[];
}

/** Most iterations of a fit unless the caller says otherwise. */
export const MAX_ITERATIONS = 1000;

/** Fits a {@link FitProblem} and gives parameters with their covariance.
 *
 * @throws {RangeError} if there are fewer residuals than parameters, the start lies outside its
 * bounds, or the residuals at the start are not finite */
export function fitLeastSquares(problem: FitProblem): FitOutcome {
  const { names, count, residuals } = problem;
  const n = names.length;
  if (count < n) {
    throw new RangeError(
      `Cannot fit ${n} parameters (${names.join(", ")}) to ${count} readings: ` +
        `give more readings or fix parameters`,
    );
  }
  const lower = Float64Array.from(names, (_, j) => problem.bounds?.[j]?.[0] ?? -Infinity);
  const upper = Float64Array.from(names, (_, j) => problem.bounds?.[j]?.[1] ?? Infinity);
  const start = Float64Array.from(problem.start);
  names.forEach((name, j) => {
    if (start[j] >= lower[j] && start[j] <= upper[j]) return;
    throw new RangeError(
      `Cannot start ${name} at ${start[j]}: its bounds are ${lower[j]} and ${upper[j]}`,
    );
  });
  const typical = start.map((value) => Math.abs(value) || 1);
  const jacobian = problem.jacobian ?? numericJacobian(residuals, count, typical, lower, upper);
  const minimum = minimizeSquares({ count, residuals, jacobian, start, lower, upper }, {
    maxIterations: problem.maxIterations ?? MAX_ITERATIONS,
    signal: problem.signal,
  });
  let residualSumOfSquares = 0;
  for (const r of minimum.residuals) residualSumOfSquares += r * r;
  const degreesOfFreedom = count - minimum.free.length;
  const variance = typeof problem.variance === "number"
    ? problem.variance
    : degreesOfFreedom > 0
    ? residualSumOfSquares / degreesOfFreedom
    : NaN;
  const covariance = parameterCovariance(minimum, variance, names);
  const cautions: Caution[] = [...covariance.cautions];
  if (!minimum.converged) {
    cautions.unshift({
      code: "not-converged",
      severity: "serious",
      message:
        `The fit did not converge: ${minimum.reason}. The values are the best point so far, not ` +
        `a result; start elsewhere, set bounds, or fix a parameter`,
    });
  }
  return {
    parameters: [...minimum.parameters],
    covariance: covariance.matrix,
    residuals: minimum.residuals,
    residualSumOfSquares,
    degreesOfFreedom,
    variance,
    converged: minimum.converged,
    reason: minimum.reason,
    iterations: minimum.iterations,
    cautions,
  };
}
