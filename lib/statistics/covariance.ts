import type { Caution } from "../quantity/caution.ts";
import { normalInverse, type SingularSystem } from "./singular_system.ts";
import type { Minimum } from "./trust_region.ts";

/** Covariance of the parameters of a least-squares fit, with what stands against it. */
export interface ParameterCovariance {
  /** Covariance, row by row; `NaN` where the data do not determine a parameter. */
  readonly matrix: number[][];
  /** Parameters at a bound and directions the data do not determine. */
  readonly cautions: readonly Caution[];
}

/** Covariance σ²(JᵀJ)⁻¹ at a minimum.
 *
 * A parameter held at a bound, or one that takes part in a direction along which the sum of squares
 * does not change, has no variance: its entries are `NaN` and a caution names it.
 *
 * @param minimum where the fit ended
 * @param variance variance σ² of a residual of unit weight
 * @param names names of the parameters, for the cautions */
export function parameterCovariance(
  minimum: Minimum,
  variance: number,
  names: readonly string[],
): ParameterCovariance {
  const n = minimum.parameters.length;
  const matrix = Array.from({ length: n }, () => new Array<number>(n).fill(NaN));
  const cautions: Caution[] = [];
  if (!minimum.converged) return { matrix, cautions };
  const { free, system } = minimum;
  names.forEach((name, j) => {
    if (free.includes(j)) return;
    cautions.push({
      code: "parameter-at-bound",
      severity: "caution",
      subject: name,
      message:
        `${name} ended at its bound ${
          minimum.parameters[j]
        } and has no standard error; the errors of ` +
        `the others hold for that value`,
    });
  });
  const undetermined = undeterminedParameters(system, free);
  if (undetermined.size > 0) {
    const list = [...undetermined].map((j) => names[j]).join(", ");
    cautions.push({
      code: "not-identifiable",
      severity: "serious",
      subject: list,
      message:
        `The data do not determine ${list}: they can be changed together without changing the fit; fix ` +
        `one of them or combine them`,
    });
  }
  const inverse = normalInverse(system);
  free.forEach((i, a) =>
    free.forEach((j, b) => {
      if (!undetermined.has(i) && !undetermined.has(j)) matrix[i][j] = variance * inverse[a][b];
    })
  );
  return { matrix, cautions };
}

/** Parameters with a part in a null direction of the Jacobian. */
function undeterminedParameters(system: SingularSystem, free: readonly number[]): Set<number> {
  const found = new Set<number>();
  for (let k = system.rank; k < system.columns; k++) {
    system.vectors[k].forEach((part, a) => {
      if (Math.abs(part) > 1e-3) found.add(free[a]);
    });
  }
  return found;
}

/** Standard errors: square roots of the diagonal. */
export function standardErrors(covariance: readonly (readonly number[])[]): number[] {
  return covariance.map((row, i) => Math.sqrt(row[i]));
}

/** Correlation matrix of a covariance matrix. */
export function correlation(covariance: readonly (readonly number[])[]): number[][] {
  const errors = standardErrors(covariance);
  return covariance.map((row, i) => row.map((value, j) => value / (errors[i] * errors[j])));
}

/** Variance of a linear combination gᵀp of parameters: gᵀ C g. */
export function varianceOf(
  gradient: readonly number[],
  covariance: readonly (readonly number[])[],
): number {
  let sum = 0;
  gradient.forEach((a, i) => gradient.forEach((b, j) => sum += a * b * covariance[i][j]));
  return sum;
}
