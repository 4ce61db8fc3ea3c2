// Evaluated when first used: the package consists of some two hundred small modules.
import defer * as quantile from "@stdlib/stats-base-dists-t-quantile";

/** From here on Student's t is the normal distribution to twelve digits; the library's quantile fails
 * above 1e15 and at infinity. */
const NORMAL = 1e12;

/** The factor t for a two-sided interval of the given coverage.
 *
 * @param level coverage, between 0 and 1
 * @param degreesOfFreedom ν; infinite for the normal distribution */
export function studentFactor(level: number, degreesOfFreedom: number): number {
  return quantile.default((1 + level) / 2, Math.min(degreesOfFreedom, NORMAL));
}
