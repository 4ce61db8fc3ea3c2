import { fisherUpperTail } from "./distributions.ts";

/** The sum of squares and degrees of freedom of a fit. */
export interface SumOfSquares {
  /** Weighted residual sum of squares. */
  readonly residualSumOfSquares: number;
  /** Readings less parameters. */
  readonly degreesOfFreedom: number;
}

/** Outcome of an F test. */
export interface FTest {
  /** F ratio. */
  readonly f: number;
  /** Degrees of freedom of numerator and denominator. */
  readonly degreesOfFreedom: readonly [number, number];
  /** Probability of so large a ratio if the smaller model holds. */
  readonly probability: number;
}

/** Extra-sum-of-squares F test of a model against a larger one that contains it.
 *
 * Source: N. R. Draper & H. Smith, Applied Regression Analysis, 3rd ed., Wiley 1998, ch. 6.
 *
 * @throws {RangeError} if the larger model has no fewer degrees of freedom, or none left */
export function nestedFTest(smaller: SumOfSquares, larger: SumOfSquares): FTest {
  const extra = smaller.degreesOfFreedom - larger.degreesOfFreedom;
  if (!(extra > 0) || !(larger.degreesOfFreedom > 0)) {
    throw new RangeError(
      `Cannot compare models with ${smaller.degreesOfFreedom} and ${larger.degreesOfFreedom} degrees ` +
        `of freedom: the larger model must have fewer, and more than 0`,
    );
  }
  const f = (smaller.residualSumOfSquares - larger.residualSumOfSquares) / extra /
    (larger.residualSumOfSquares / larger.degreesOfFreedom);
  return {
    f,
    degreesOfFreedom: [extra, larger.degreesOfFreedom],
    probability: fisherUpperTail(f, extra, larger.degreesOfFreedom),
  };
}
