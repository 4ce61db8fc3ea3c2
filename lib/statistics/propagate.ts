import { Estimate } from "../quantity/estimate.ts";
import { varianceOf } from "./covariance.ts";

/** What {@link propagate} needs beside the function. */
export interface PropagateOptions {
  /** Unit of the result. */
  readonly unit: string;
  /** Degrees of freedom behind the covariance; a known one if left out. */
  readonly degreesOfFreedom?: number;
  /** On which scale the result's error is symmetric.
   * @default {"linear"} */
  readonly symmetricOn?: "linear" | "logarithmic";
}

/** A function of fitted parameters with its standard error, u² = gᵀ C g, g by central differences.
 *
 * Source: JCGM 100:2008 (GUM), 5.2.2.
 *
 * @param f function of the parameters
 * @param parameters where to evaluate it, length n
 * @param covariance covariance of the parameters, n × n
 * @param options unit and degrees of freedom of the result */
export function propagate(
  f: (parameters: readonly number[]) => number,
  parameters: readonly number[],
  covariance: readonly (readonly number[])[],
  options: PropagateOptions,
): Estimate {
  const point = [...parameters];
  const gradient = parameters.map((value, j) => {
    // A step of a part of the standard error keeps the difference inside the region that counts.
    const error = Math.sqrt(covariance[j][j]);
    const h = Math.max(Math.abs(value) * 1e-6, Number.isFinite(error) ? error * 1e-4 : 0) || 1e-9;
    point[j] = value + h;
    const up = f(point);
    point[j] = value - h;
    const down = f(point);
    point[j] = value;
    return (up - down) / (2 * h);
  });
  // A parameter that does not enter must not spoil the result by its own missing variance.
  const used = gradient.map((g, j) => [g, j] as const).filter(([g]) => g !== 0);
  const variance = varianceOf(
    used.map(([g]) => g),
    used.map(([, i]) => used.map(([, j]) => covariance[i][j])),
  );
  return new Estimate({
    value: f(parameters),
    standardError: Math.sqrt(variance),
    unit: options.unit,
    degreesOfFreedom: options.degreesOfFreedom,
    symmetricOn: options.symmetricOn,
  });
}
