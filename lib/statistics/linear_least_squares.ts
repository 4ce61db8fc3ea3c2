import type { Caution } from "../quantity/caution.ts";
import { Estimate } from "../quantity/estimate.ts";
import * as option from "../quantity/options.ts";
import { Result } from "../quantity/result.ts";
import type { Section } from "../quantity/section.ts";
import { standardErrors, varianceOf } from "./covariance.ts";
import { dampedStep, normalInverse, reduceSystem } from "./singular_system.ts";

/** What {@link linearLeastSquares} fits. */
export interface LinearLeastSquaresOptions {
  /** Predictors: length m for a straight line, or shape [m][·] for several. */
  x: number[] | number[][];
  /** Responses, length m. */
  y: number[];
  /** Weights, length m, proportional to 1/σ². All 1 where left out. */
  weights?: number[];
  /** Whether the weights are 1/σ² with σ known, so that the errors are not scaled by the residuals.
   * @default {false} */
  knownUncertainties?: boolean;
  /** Whether a constant term comes first.
   * @default {true} */
  intercept?: boolean;
  /** Units of the coefficients; pure numbers where left out. */
  units?: string[];
}

/** A linear least-squares fit; coefficients with the intercept first. */
export class LinearFit extends Result {
  /** Kind of result. */
  override readonly kind: string = "linear-fit";
  /** What the reader must know. */
  override readonly cautions: readonly Caution[] = [];
  /** Coefficients with standard errors: intercept (if any), then one a predictor. */
  readonly coefficients: readonly Estimate[];
  /** Covariance of the coefficients. */
  readonly covariance: readonly (readonly number[])[];
  /** Residuals, response less fit, unweighted; length m. */
  readonly residuals: Float64Array;
  /** Weighted sum of squares of the residuals. */
  readonly residualSumOfSquares: number;
  /** Readings less coefficients. */
  readonly degreesOfFreedom: number;
  /** Coefficient of determination, weighted, about the mean where there is an intercept. */
  readonly rSquared: number;
  readonly #intercept: boolean;

  /** A fit from its parts; `linearLeastSquares` makes it.
   *
   * @param parts what the fit found */
  constructor(
    parts: Pick<
      LinearFit,
      | "coefficients"
      | "covariance"
      | "residuals"
      | "residualSumOfSquares"
      | "degreesOfFreedom"
      | "rSquared"
    >,
    intercept: boolean,
  ) {
    super();
    this.coefficients = parts.coefficients;
    this.covariance = parts.covariance;
    this.residuals = parts.residuals;
    this.residualSumOfSquares = parts.residualSumOfSquares;
    this.degreesOfFreedom = parts.degreesOfFreedom;
    this.rSquared = parts.rSquared;
    this.#intercept = intercept;
  }

  /** First line of every view. */
  override get title(): string {
    return `Linear least squares, ${this.residuals.length} readings`;
  }

  /** Constant term; 0 without error where the fit has none. */
  get intercept(): Estimate {
    return this.#intercept
      ? this.coefficients[0]
      : new Estimate({ value: 0, standardError: 0, unit: "1" });
  }

  /** Slope of the first predictor. */
  get slope(): Estimate {
    return this.coefficients[this.#intercept ? 1 : 0];
  }

  /** The fitted line at predictor values, with the standard error of the mean response.
   *
   * @param x one value, or one a predictor */
  at(x: number | number[]): Estimate {
    const terms = [...(this.#intercept ? [1] : []), ...(Array.isArray(x) ? x : [x])];
    const value = terms.reduce((sum, term, j) => sum + term * this.coefficients[j].value, 0);
    return new Estimate({
      value,
      standardError: Math.sqrt(varianceOf(terms, this.covariance)),
      unit: "1",
      degreesOfFreedom: this.coefficients[0].degreesOfFreedom,
    });
  }

  /** The content, in reading order. */
  override sections(): Section[] {
    const first = this.#intercept ? 1 : 0;
    const name = (j: number) =>
      j < first
        ? "intercept"
        : this.coefficients.length === first + 1
        ? "slope"
        : `b${j + 1 - first}`;
    return [{
      kind: "values",
      key: "coefficients",
      rows: this.coefficients.map((value, j) => ({ key: name(j), label: name(j), value })),
    }, {
      kind: "values",
      rows: [
        {
          key: "residualSumOfSquares",
          label: "residual sum of squares",
          value: this.residualSumOfSquares,
        },
        { key: "degreesOfFreedom", label: "degrees of freedom", value: this.degreesOfFreedom },
        { key: "rSquared", label: "r²", value: this.rSquared },
      ],
    }];
  }
}

/** Fits a linear model by weighted least squares, with covariance s² (XᵀWX)⁻¹.
 *
 * Columns are scaled and triangularised orthogonally, the normal equations are never formed.
 * Source: Å. Björck, Numerical Methods for Least Squares Problems, SIAM 1996, ch. 2.
 *
 * @param options predictors, responses, weights
 * @throws {TypeError} on an unknown option or one of the wrong type
 * @throws {RangeError} on lengths that do not match, fewer readings than coefficients, or predictors
 * that do not determine the coefficients
 * @example
 * ```ts
 * import { strictEqual } from "node:assert";
 * import { linearLeastSquares } from "ratebook";
 *
 * const line = linearLeastSquares({ x: [0, 1, 2, 3], y: [1, 3.1, 4.9, 7] });
 * strictEqual(line.slope.toString(), "1.980 ± 0.042");
 * ``` */
export function linearLeastSquares(options: LinearLeastSquaresOptions): LinearFit {
  const read = option.readOptions("linearLeastSquares", options, {
    x: option.either(
      option.list(option.number()),
      option.list(option.list(option.number())),
    ) as option.OptionReader<number[] | number[][]>,
    y: option.list(option.number()),
    weights: option.list(option.number({ min: 0 })),
    knownUncertainties: option.flag,
    intercept: option.flag,
    units: option.list(option.text),
  });
  const { x, y, weights, intercept = true } = read;
  if (!x || !y) throw new TypeError(`Cannot fit a line: both "x" and "y" must be given`);
  const m = y.length;
  if (x.length !== m || (weights && weights.length !== m)) {
    throw new RangeError(
      `Cannot fit a line: x has ${x.length} entries, y ${m}` +
        (weights ? `, weights ${weights.length}` : "") + "; they must be as many",
    );
  }
  const rows = x.map((row) => [
    ...(intercept ? [1] : []),
    ...(typeof row === "number" ? [row] : row),
  ]);
  const n = rows[0]?.length ?? 0;
  if (m < n || n === 0) {
    throw new RangeError(`Cannot fit ${n} coefficients to ${m} readings: give more readings`);
  }
  const design = new Float64Array(m * n);
  const target = new Float64Array(m);
  const scale = new Float64Array(n);
  for (let i = 0; i < m; i++) {
    const root = Math.sqrt(weights?.[i] ?? 1);
    target[i] = -root * y[i];
    for (let j = 0; j < n; j++) {
      design[i * n + j] = root * rows[i][j];
      scale[j] += design[i * n + j] ** 2;
    }
  }
  for (let j = 0; j < n; j++) scale[j] = Math.sqrt(scale[j]) || 1;
  const system = reduceSystem(design, target, scale);
  if (system.rank < n) {
    throw new RangeError(
      `Cannot fit ${n} coefficients: the predictors determine only ${system.rank} of them; ` +
        `vary the predictors or leave one out`,
    );
  }
  const solution = new Float64Array(n);
  dampedStep(system, 0, solution);
  const residuals = Float64Array.from(
    y,
    (value, i) => value - rows[i].reduce((sum, term, j) => sum + term * solution[j], 0),
  );
  const square = (values: ArrayLike<number>) =>
    Array.from(values).reduce((sum, v, i) => sum + (weights?.[i] ?? 1) * v * v, 0);
  const residualSumOfSquares = square(residuals);
  const degreesOfFreedom = m - n;
  const variance = read.knownUncertainties
    ? 1
    : degreesOfFreedom > 0
    ? residualSumOfSquares / degreesOfFreedom
    : NaN;
  const covariance = normalInverse(system).map((row) => row.map((value) => value * variance));
  const errors = standardErrors(covariance);
  const totalWeight = y.reduce((sum, _, i) => sum + (weights?.[i] ?? 1), 0);
  const mean = intercept
    ? y.reduce((sum, v, i) => sum + (weights?.[i] ?? 1) * v, 0) / totalWeight
    : 0;
  return new LinearFit({
    coefficients: errors.map((standardError, j) =>
      new Estimate({
        value: solution[j],
        standardError,
        unit: read.units?.[j] ?? "1",
        degreesOfFreedom: read.knownUncertainties ? undefined : degreesOfFreedom,
      })
    ),
    covariance,
    residuals,
    residualSumOfSquares,
    degreesOfFreedom,
    rSquared: 1 - residualSumOfSquares / square(y.map((v) => v - mean)),
  }, intercept);
}
