import type { JacobianStructure } from "./jacobian_structure.ts";

/** Factors L U = d I − J on a fixed pattern, refilled at will: L has a unit diagonal, U keeps the
 * reciprocals of its pivots. Row i of L and U is made in a dense row from the rows above it.
 *
 * Pivots stay on the diagonal: d = 1/(hγ) makes them large whenever a step is small enough, and a
 * step whose factors fail is tried again with a smaller h.
 *
 * Source: T. A. Davis, Direct methods for sparse linear systems, SIAM 2006, ch. 6. */
export class SparseFactors {
  readonly #structure: JacobianStructure;
  readonly #values: Float64Array;
  readonly #pivots: Float64Array;
  readonly #row: Float64Array;
  /** Ends of the upper parts, so that the loops read one table. */
  readonly #upperStart: Int32Array;

  /** @param structure the pattern */
  constructor(structure: JacobianStructure) {
    this.#structure = structure;
    this.#values = new Float64Array(structure.column.length);
    this.#pivots = new Float64Array(structure.size);
    this.#row = new Float64Array(structure.size);
    this.#upperStart = structure.diagonal.map((p) => p + 1);
  }

  /** Factors d I − J; false where a pivot is 0 or not finite. */
  factor(d: number, jacobian: Float64Array): boolean {
    const { size, rowStart, column, diagonal, jacobianStart, jacobianColumn } = this.#structure;
    const values = this.#values;
    const pivots = this.#pivots;
    const upperStart = this.#upperStart;
    const row = this.#row;
    let q = 0;
    for (let i = 0; i < size; i++) {
      const begin = rowStart[i];
      const middle = diagonal[i];
      const end = rowStart[i + 1];
      for (let p = begin; p < end; p++) row[column[p]] = 0;
      for (const stop = jacobianStart[i + 1]; q < stop; q++) row[jacobianColumn[q]] = -jacobian[q];
      row[i] += d;
      for (let p = begin; p < middle; p++) {
        const k = column[p];
        const multiplier = row[k] * pivots[k];
        values[p] = multiplier;
        if (multiplier === 0) continue;
        for (let u = upperStart[k], stop = rowStart[k + 1]; u < stop; u++) {
          row[column[u]] -= multiplier * values[u];
        }
      }
      const pivot = 1 / row[i];
      if (!(Math.abs(pivot) < Infinity)) return false;
      pivots[i] = pivot;
      for (let p = middle + 1; p < end; p++) values[p] = row[column[p]];
    }
    return true;
  }

  /** Solves L U x = b, b in `x` on entry. */
  solve(x: Float64Array): void {
    const { size, rowStart, column, diagonal } = this.#structure;
    const values = this.#values;
    const pivots = this.#pivots;
    for (let i = 0; i < size; i++) {
      let sum = x[i];
      for (let p = rowStart[i], end = diagonal[i]; p < end; p++) sum -= values[p] * x[column[p]];
      x[i] = sum;
    }
    for (let i = size - 1; i >= 0; i--) {
      let sum = x[i];
      for (let p = diagonal[i] + 1, end = rowStart[i + 1]; p < end; p++) {
        sum -= values[p] * x[column[p]];
      }
      x[i] = sum * pivots[i];
    }
  }
}
