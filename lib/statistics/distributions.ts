// Evaluated when first used: these packages consist of some two hundred small modules.
import defer * as fCdf from "@stdlib/stats-base-dists-f-cdf";
import defer * as normalCdf from "@stdlib/stats-base-dists-normal-cdf";
import defer * as tCdf from "@stdlib/stats-base-dists-t-cdf";
import defer * as chiSquare from "./chi_square_tail.ts";

/** Probability that Fisher's F with (ν₁, ν₂) degrees of freedom exceeds a value. */
export function fisherUpperTail(value: number, numerator: number, denominator: number): number {
  // The reciprocal of F has the degrees of freedom exchanged: this keeps small tails exact.
  if (!(value > 0)) return Number.isNaN(value) ? NaN : 1;
  return fCdf.default(1 / value, denominator, numerator);
}

/** Probability that χ² with ν degrees of freedom exceeds a value. */
export function chiSquareUpperTail(value: number, degreesOfFreedom: number): number {
  if (!(value > 0)) return Number.isNaN(value) ? NaN : 1;
  return chiSquare.upperTail(value, degreesOfFreedom);
}

/** Two-sided probability of Student's t with ν degrees of freedom (normal for infinite ν). */
export function studentTwoSided(value: number, degreesOfFreedom: number): number {
  if (degreesOfFreedom === Infinity) return normalTwoSided(value);
  return 2 * tCdf.default(-Math.abs(value), degreesOfFreedom);
}

/** Two-sided probability of a standard normal deviate. */
export function normalTwoSided(value: number): number {
  return 2 * normalCdf.default(-Math.abs(value), 0, 1);
}

export { studentFactor } from "../quantity/student_factor.ts";
