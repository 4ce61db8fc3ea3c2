import type { Caution } from "../quantity/caution.ts";
import { Estimate } from "../quantity/estimate.ts";
import * as option from "../quantity/options.ts";
import { Result } from "../quantity/result.ts";
import type { Section } from "../quantity/section.ts";
import { correlation, standardErrors } from "./covariance.ts";
import { fitLeastSquares, type FitOutcome } from "./least_squares_fit.ts";

/** A model: the response at predictors x for parameters p. */
export type Model = (x: number[], p: number[]) => number;

/** What {@link nonlinearLeastSquares} fits. */
export interface NonlinearLeastSquaresOptions {
  /** The model. */
  model: Model;
  /** Predictors, one row a reading: shape [m][·]. */
  x: number[][];
  /** Responses, length m. */
  y: number[];
  /** Starting values, length n. */
  start: number[];
  /** Weights, length m, proportional to 1/σ². All 1 where left out. */
  weights?: number[];
  /** Whether the weights are 1/σ² with σ known, so that the errors are not scaled by the residuals.
   * @default {false} */
  knownUncertainties?: boolean;
  /** Lower and upper bound of each parameter, length n. */
  bounds?: ([number, number] | undefined)[];
  /** Names of the parameters; b1, b2 … where left out. */
  names?: string[];
  /** Units of the parameters; pure numbers where left out. */
  units?: string[];
  /** Most iterations.
   * @default {1000} */
  maxIterations?: number;
  /** Aborts the search; the best point so far is returned, marked as not converged. */
  signal?: AbortSignal;
}

/** A nonlinear least-squares fit. */
export class NonlinearFit extends Result {
  /** Kind of result. */
  override readonly kind: string = "nonlinear-fit";
  /** Estimates with standard errors; no standard error where the fit did not converge. */
  readonly parameters: readonly Estimate[];
  /** Names of the parameters. */
  readonly names: readonly string[];
  /** Covariance of the parameters, in their units. */
  readonly covariance: readonly (readonly number[])[];
  /** Residuals, response less model, unweighted; length m. */
  readonly residuals: Float64Array;
  /** Weighted sum of squares of the residuals. */
  readonly residualSumOfSquares: number;
  /** Readings less free parameters. */
  readonly degreesOfFreedom: number;
  /** Whether a minimum was reached. */
  readonly converged: boolean;
  /** Why the search ended. */
  readonly reason: string;
  /** Iterations taken. */
  readonly iterations: number;
  /** What the reader must know. */
  override readonly cautions: readonly Caution[];

  /** A fit from its outcome; `nonlinearLeastSquares` makes it.
   *
   * @param outcome the fit @param labels names and units of the parameters @param residuals unweighted */
  constructor(
    outcome: FitOutcome,
    labels: { names: readonly string[]; units: readonly string[] },
    residuals: Float64Array,
    known: boolean,
  ) {
    super();
    this.names = labels.names;
    this.covariance = outcome.covariance;
    const errors = standardErrors(outcome.covariance);
    this.parameters = outcome.parameters.map((value, j) =>
      new Estimate({
        value,
        standardError: errors[j],
        unit: labels.units[j],
        degreesOfFreedom: known ? undefined : outcome.degreesOfFreedom,
      })
    );
    this.residuals = residuals;
    this.residualSumOfSquares = outcome.residualSumOfSquares;
    this.degreesOfFreedom = outcome.degreesOfFreedom;
    this.converged = outcome.converged;
    this.reason = outcome.reason;
    this.iterations = outcome.iterations;
    this.cautions = outcome.cautions;
  }

  /** First line of every view. */
  override get title(): string {
    const end = this.converged ? "converged" : "NOT CONVERGED";
    return `Nonlinear least squares, ${this.residuals.length} readings, ${end} in ${this.iterations} ` +
      `iterations`;
  }

  /** Correlation matrix of the parameters. */
  get correlation(): number[][] {
    return correlation(this.covariance);
  }

  /** The content, in reading order. */
  override sections(): Section[] {
    return [{
      kind: "values",
      key: "parameters",
      rows: this.parameters.map((value, j) => ({
        key: this.names[j],
        label: this.names[j],
        value,
      })),
    }, {
      kind: "values",
      rows: [
        {
          key: "residualSumOfSquares",
          label: "residual sum of squares",
          value: this.residualSumOfSquares,
        },
        { key: "degreesOfFreedom", label: "degrees of freedom", value: this.degreesOfFreedom },
        { key: "reason", label: "ended because", value: this.reason },
      ],
    }];
  }
}

/** Fits a nonlinear model by weighted least squares: min Σ wᵢ (yᵢ − f(xᵢ, p))².
 *
 * Trust-region Levenberg–Marquardt with parameters scaled, bounds kept, and derivatives by central
 * differences. Standard errors are those of the linearised model, s² (JᵀWJ)⁻¹.
 *
 * Source: J. J. Moré, Lect. Notes Math. 630 (1978) 105; D. M. Bates & D. G. Watts, Nonlinear
 * Regression Analysis and Its Applications, Wiley 1988, ch. 2.
 *
 * @param options model, data, start
 * @returns estimates, covariance and how the search ended
 * @throws {TypeError} on an option of the wrong type or an unknown one
 * @throws {RangeError} on lengths that do not match, a negative weight, fewer readings than
 * parameters, or a model that is not finite at the start
 * @example A first-order decay
 * ```ts
 * import { ok } from "node:assert";
 * import { nonlinearLeastSquares } from "ratebook";
 *
 * const times = [0, 10, 20, 40, 80];
 * const fit = nonlinearLeastSquares({
 *   model: ([t], [c0, k]) => c0 * Math.exp(-k * t),
 *   x: times.map((t) => [t]),
 *   y: [0.1, 0.0742, 0.0549, 0.0301, 0.0091],
 *   start: [0.1, 0.01],
 *   names: ["c0", "k"],
 *   units: ["mol/L", "1/s"],
 * });
 * ok(fit.converged);
 * ok(Math.abs(fit.parameters[1].value - 0.03) < 0.001); // half-life 23 s
 * ``` */
export function nonlinearLeastSquares(options: NonlinearLeastSquaresOptions): NonlinearFit {
  const read = option.readOptions("nonlinearLeastSquares", options, {
    model: option.callable<Model>,
    x: option.list(option.list(option.number())),
    y: option.list(option.number()),
    start: option.list(option.number()),
    weights: option.list(option.number({ min: 0 })),
    knownUncertainties: option.flag,
    bounds: option.list(boundsPair),
    names: option.list(option.text),
    units: option.list(option.text),
    maxIterations: option.integer(1),
    signal: option.instance(AbortSignal),
  });
  for (const name of ["model", "x", "y", "start"] as const) {
    if (read[name] === undefined) {
      throw new TypeError(`Cannot fit: the option "${name}" of nonlinearLeastSquares is missing`);
    }
  }
  const { model, x, y, start } = read as Required<typeof read>;
  const names = read.names ?? start.map((_, j) => `b${j + 1}`);
  const units = read.units ?? start.map(() => "1");
  const root = Float64Array.from(y, (_, i) => Math.sqrt(read.weights?.[i] ?? 1));
  matchLength("x", x, "y", y);
  if (read.weights) matchLength("weights", read.weights, "y", y);
  if (read.bounds) matchLength("bounds", read.bounds, "start", start);
  matchLength("names", names, "start", start);
  matchLength("units", units, "start", start);
  const outcome = fitLeastSquares({
    names,
    count: y.length,
    residuals: (p, out) => {
      const parameters = Array.from(p);
      for (let i = 0; i < y.length; i++) out[i] = root[i] * (y[i] - model(x[i], parameters));
    },
    start,
    bounds: read.bounds,
    variance: read.knownUncertainties ? 1 : "estimated",
    maxIterations: read.maxIterations,
    signal: read.signal,
  });
  const residuals = Float64Array.from(y, (value, i) => value - model(x[i], outcome.parameters));
  return new NonlinearFit(outcome, { names, units }, residuals, read.knownUncertainties ?? false);
}

function boundsPair(value: unknown, name: string): [number, number] | undefined {
  if (value === undefined || value === null) return undefined;
  const pair = Array.isArray(value) && value.length === 2 &&
    value.every((end) => typeof end === "number") && value[0] <= value[1];
  if (pair) return value as [number, number];
  throw new TypeError(
    `Cannot use ${
      JSON.stringify(value)
    } as ${name}: expected [lower, upper], ±Infinity where there is none`,
  );
}

function matchLength(a: string, x: readonly unknown[], b: string, y: readonly unknown[]): void {
  if (x.length === y.length) return;
  throw new RangeError(
    `Cannot fit: "${a}" has ${x.length} entries and "${b}" has ${y.length}; they must be as many`,
  );
}
