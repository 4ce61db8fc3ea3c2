import chiSquareCdf from "@stdlib/stats-base-dists-chisquare-cdf";
import fCdf from "@stdlib/stats-base-dists-f-cdf";
import normalCdf from "@stdlib/stats-base-dists-normal-cdf";
import tCdf from "@stdlib/stats-base-dists-t-cdf";
import tQuantile from "@stdlib/stats-base-dists-t-quantile";

/** Probability that Fisher's F with (ν₁, ν₂) degrees of freedom exceeds a value. */
export function fisherUpperTail(value: number, numerator: number, denominator: number): number {
  // The reciprocal of F has the degrees of freedom exchanged: this keeps small tails exact.
  if (!(value > 0)) return Number.isNaN(value) ? NaN : 1;
  return fCdf(1 / value, denominator, numerator);
}

/** Probability that χ² with ν degrees of freedom exceeds a value. */
export function chiSquareUpperTail(value: number, degreesOfFreedom: number): number {
  return 1 - chiSquareCdf(value, degreesOfFreedom);
}

/** Two-sided probability of Student's t with ν degrees of freedom (normal for infinite ν). */
export function studentTwoSided(value: number, degreesOfFreedom: number): number {
  return 2 * tCdf(-Math.abs(value), degreesOfFreedom);
}

/** Two-sided probability of a standard normal deviate. */
export function normalTwoSided(value: number): number {
  return 2 * normalCdf(-Math.abs(value), 0, 1);
}

/** The factor t for a two-sided interval of the given coverage. */
export function studentFactor(level: number, degreesOfFreedom: number): number {
  return tQuantile((1 + level) / 2, degreesOfFreedom);
}
