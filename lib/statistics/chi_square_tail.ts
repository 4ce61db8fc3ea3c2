import incompleteGamma from "@stdlib/math-base-special-gammainc";

/** Upper tail of χ² with ν degrees of freedom, Q(ν/2, x/2): exact where it is tiny. */
export function upperTail(value: number, degreesOfFreedom: number): number {
  return incompleteGamma(value / 2, degreesOfFreedom / 2, true, true);
}
