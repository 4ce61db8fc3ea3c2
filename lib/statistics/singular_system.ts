import { Matrix, SingularValueDecomposition } from "ml-matrix";
import { triangularize } from "./triangular_factor.ts";

/** Singular values below this share of the largest count as zero, columns being of unit length. */
export const RANK_TOLERANCE = 1e-11;

/** A least-squares system min ‖J s + r‖ reduced to the singular values of J with its columns
 * scaled to unit length, from which steps of any damping and the covariance follow. */
export interface SingularSystem {
  /** Columns of J. */
  readonly columns: number;
  /** Singular values of the scaled J, largest first. */
  readonly singularValues: readonly number[];
  /** Right singular vectors, `vectors[k][j]`: component j of the k-th. */
  readonly vectors: readonly (readonly number[])[];
  /** Uᵀ r: the residual along each left singular vector. */
  readonly projection: readonly number[];
  /** Scale of each column: J = J_scaled · diag(scale). */
  readonly scale: Float64Array;
  /** Sum of squares of r, and of the part of r that lies in the column space of J. */
  readonly sumOfSquares: number;
  readonly reachable: number;
  /** Number of singular values that count. */
  readonly rank: number;
}

/** Reduces a Jacobian and residual vector.
 *
 * @param jacobian row-major, m·n, kept
 * @param residual length m, kept
 * @param scale scale of each column, length n; entries > 0
 * @param tolerance share of the largest singular value below which one counts as zero */
export function reduceSystem(
  jacobian: Float64Array,
  residual: Float64Array,
  scale: Float64Array,
  tolerance = RANK_TOLERANCE,
): SingularSystem {
  const n = scale.length;
  const m = residual.length;
  const rows = Math.max(m, n);
  const a = new Float64Array(rows * n);
  for (let i = 0; i < m; i++) {
    for (let j = 0; j < n; j++) a[i * n + j] = jacobian[i * n + j] / scale[j];
  }
  const b = new Float64Array(rows);
  b.set(residual);
  let sumOfSquares = 0;
  for (let i = 0; i < m; i++) sumOfSquares += residual[i] * residual[i];
  triangularize(a, b, rows, n);
  const triangle = new Matrix(n, n);
  for (let i = 0; i < n; i++) for (let j = i; j < n; j++) triangle.set(i, j, a[i * n + j]);
  const svd = new SingularValueDecomposition(triangle);
  const left = svd.leftSingularVectors;
  const right = svd.rightSingularVectors;
  const singularValues = [...svd.diagonal];
  const vectors = singularValues.map((_, k) =>
    Array.from({ length: n }, (_, j) => right.get(j, k))
  );
  const projection = singularValues.map((_, k) => {
    let dot = 0;
    for (let i = 0; i < n; i++) dot += left.get(i, k) * b[i];
    return dot;
  });
  let reachable = 0;
  for (let i = 0; i < n; i++) reachable += b[i] * b[i];
  const largest = singularValues[0] ?? 0;
  const rank = singularValues.filter((s) => s > tolerance * largest && s > 0).length;
  return { columns: n, singularValues, vectors, projection, scale, sumOfSquares, reachable, rank };
}

/** The step s of min ‖J s + r‖² + λ‖D s‖², written to `out`; returns ‖D s‖. */
export function dampedStep(system: SingularSystem, damping: number, out: Float64Array): number {
  out.fill(0);
  let norm = 0;
  for (let k = 0; k < system.rank; k++) {
    const s = system.singularValues[k];
    const length = -s * system.projection[k] / (s * s + damping);
    norm += length * length;
    for (let j = 0; j < out.length; j++) out[j] += length * system.vectors[k][j];
  }
  for (let j = 0; j < out.length; j++) out[j] /= system.scale[j];
  return Math.sqrt(norm);
}

/** The damping λ for which ‖D s‖ equals the trust radius, 0 where the full step fits inside.
 *
 * Newton's method on 1/‖D s(λ)‖, which is nearly linear in λ.
 * Source: J. J. Moré, Lect. Notes Math. 630 (1978) 105. */
export function dampingFor(system: SingularSystem, radius: number): number {
  const { singularValues, projection, rank } = system;
  const norm = (damping: number): [number, number] => {
    let square = 0;
    let slope = 0;
    for (let k = 0; k < rank; k++) {
      const s = singularValues[k];
      const denominator = s * s + damping;
      const length = s * projection[k] / denominator;
      square += length * length;
      slope -= length * length / denominator;
    }
    const size = Math.sqrt(square);
    return [size, slope / size];
  };
  let damping = 0;
  for (let iteration = 0; iteration < 60; iteration++) {
    const [size, slope] = norm(damping);
    if (size <= radius * (damping === 0 ? 1 : 1.001) || !(size > 0)) break;
    damping = Math.max(damping + (size / radius) * (size - radius) / -slope, damping);
  }
  return damping;
}

/** (JᵀJ)⁺ in the units of the parameters, row by row. */
export function normalInverse(system: SingularSystem): number[][] {
  const n = system.columns;
  return Array.from(
    { length: n },
    (_, i) =>
      Array.from({ length: n }, (_, j) => {
        let sum = 0;
        for (let k = 0; k < system.rank; k++) {
          sum += system.vectors[k][i] * system.vectors[k][j] / system.singularValues[k] ** 2;
        }
        return sum / (system.scale[i] * system.scale[j]);
      }),
  );
}
