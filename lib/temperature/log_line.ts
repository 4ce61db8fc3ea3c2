import { chiSquareUpperTail } from "../statistics/distributions.ts";
import { dampedStep, normalInverse, reduceSystem } from "../statistics/singular_system.ts";

/** A straight line through ln k, about the point where its two parameters do not correlate. */
export interface LogLine {
  /** Reference abscissa 1/T_ref, 1/K. */
  readonly reference: number;
  /** ln k at the reference. */
  readonly height: number;
  /** −d ln k/d(1/T) = Ea/R, K. */
  readonly steepness: number;
  /** Variances of height and steepness, which do not correlate. */
  readonly heightVariance: number;
  readonly steepnessVariance: number;
  /** Variance of ln k of a typical single point about the line. */
  readonly pointVariance: number;
  /** Degrees of freedom behind the variances; infinite where stated uncertainties were trusted. */
  readonly degreesOfFreedom: number;
  /** Residuals, ln k less line. */
  readonly residuals: Float64Array;
  /** Σ(residual/u)² and its probability, where uncertainties were stated. */
  readonly chiSquare?: number;
  readonly chiSquareProbability?: number;
  /** Factor by which stated uncertainties were widened to cover the scatter; 1 if they did. */
  readonly birgeRatio: number;
}

/** Below this probability the scatter is more than the stated uncertainties allow. */
const SCATTER_PROBABILITY = 0.05;

/** Fits ln k = h − b(x − x_ref), x = 1/T, with weights 1/u²(ln k); x_ref is the weighted mean of x, at
 * which the estimates of h and b do not correlate.
 *
 * Stated uncertainties are trusted unless the scatter about the line exceeds them (χ² test at 0.05);
 * then they are widened by the Birge ratio √(χ²/ν) and the interval uses Student's t with ν degrees
 * of freedom. Without stated uncertainties all ln k weigh alike and the scatter gives the variance.
 *
 * Source: R. T. Birge, Phys. Rev. 40 (1932) 207; for the reference temperature M. Schwaab &
 * J. C. Pinto, Chem. Eng. Sci. 62 (2007) 2750.
 *
 * @param x 1/T, 1/K @param y ln k @param uncertainties u(ln k), or none */
export function fitLogLine(
  x: readonly number[],
  y: readonly number[],
  uncertainties?: readonly number[],
): LogLine {
  const m = x.length;
  const weights = x.map((_, i) => uncertainties ? 1 / uncertainties[i] ** 2 : 1);
  const total = weights.reduce((sum, w) => sum + w, 0);
  const reference = x.reduce((sum, value, i) => sum + weights[i] * value, 0) / total;
  const design = new Float64Array(2 * m);
  const target = new Float64Array(m);
  const scale = new Float64Array(2);
  for (let i = 0; i < m; i++) {
    const root = Math.sqrt(weights[i]);
    design[2 * i] = root;
    design[2 * i + 1] = -root * (x[i] - reference);
    target[i] = -root * y[i];
    scale[0] += design[2 * i] ** 2;
    scale[1] += design[2 * i + 1] ** 2;
  }
  scale.forEach((value, j) => scale[j] = Math.sqrt(value));
  const system = reduceSystem(design, target, scale);
  const solution = new Float64Array(2);
  dampedStep(system, 0, solution);
  const inverse = normalInverse(system);
  const [height, steepness] = solution;
  const residuals = Float64Array.from(
    y,
    (value, i) => value - height + steepness * (x[i] - reference),
  );
  const square = residuals.reduce((sum, r, i) => sum + weights[i] * r * r, 0);
  const freedom = m - 2;
  const probability = uncertainties && freedom > 0
    ? chiSquareUpperTail(square, freedom)
    : undefined;
  const trusted = uncertainties !== undefined &&
    (probability === undefined || probability >= SCATTER_PROBABILITY);
  const variance = trusted ? 1 : freedom > 0 ? square / freedom : NaN;
  const meanInverseWeight = weights.reduce((sum, w) => sum + 1 / w, 0) / m;
  return {
    reference,
    height,
    steepness,
    heightVariance: variance * inverse[0][0],
    steepnessVariance: variance * inverse[1][1],
    pointVariance: variance * meanInverseWeight,
    degreesOfFreedom: trusted ? Infinity : freedom,
    residuals,
    chiSquare: uncertainties ? square : undefined,
    chiSquareProbability: probability,
    birgeRatio: uncertainties && !trusted ? Math.sqrt(variance) : 1,
  };
}
