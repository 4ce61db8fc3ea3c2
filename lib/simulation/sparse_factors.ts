import type { JacobianStructure } from "./jacobian_structure.ts";

/** Factors L U = d I − J on a fixed pattern, refilled at will: L has a unit diagonal, U keeps the
 * reciprocals of its pivots. Row i of L and U is made in a dense row from the rows above it; rows
 * above whose patterns agree (supernodes) are subtracted together, up to four at a time.
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
  #d = 1;
  /** Where the upper part of each row begins. */
  readonly #upperStart: Int32Array;
  /** For each entry of L, how many entries from it on (1, 2 or 4) belong to rows of one pattern. */
  readonly #together: Uint8Array;

  /** @param structure the pattern */
  constructor(structure: JacobianStructure) {
    this.#structure = structure;
    this.#values = new Float64Array(structure.column.length);
    this.#pivots = new Float64Array(structure.size);
    this.#row = new Float64Array(structure.size);
    this.#upperStart = structure.diagonal.map((p) => p + 1);
    this.#together = togetherCounts(structure);
  }

  /** Factors d I − J; false where a pivot is 0 or not finite. */
  factor(d: number, jacobian: Float64Array): boolean {
    const { size, rowStart, column, diagonal, jacobianStart, jacobianColumn, sums, sumOf } =
      this.#structure;
    this.#d = d;
    const values = this.#values;
    const pivots = this.#pivots;
    const upperStart = this.#upperStart;
    const together = this.#together;
    const row = this.#row;
    for (let i = 0; i < size; i++) {
      const begin = rowStart[i];
      const middle = diagonal[i];
      const end = rowStart[i + 1];
      for (let p = begin; p < end; p++) row[column[p]] = 0;
      if (sumOf[i] < 0) {
        const stop = jacobianStart[i + 1];
        for (let q = jacobianStart[i]; q < stop; q++) row[jacobianColumn[q]] = -jacobian[q];
        row[i] += d;
      } else {
        const { species, weights } = sums[sumOf[i]];
        for (let s = 0; s < species.length; s++) row[species[s]] = -weights[s];
        row[i] = 1;
      }
      for (let p = begin; p < middle;) {
        const k = column[p];
        const count = together[p];
        const m0 = row[k] * pivots[k];
        values[p] = m0;
        if (count === 1) {
          p++;
          if (m0 === 0) continue;
          for (let u = upperStart[k], stop = rowStart[k + 1]; u < stop; u++) {
            row[column[u]] -= m0 * values[u];
          }
          continue;
        }
        let u0 = upperStart[k];
        row[k + 1] -= m0 * values[u0];
        const m1 = row[k + 1] * pivots[k + 1];
        values[p + 1] = m1;
        if (count === 2) {
          let u1 = upperStart[k + 1];
          for (const stop = rowStart[k + 2]; u1 < stop; u1++) {
            u0++;
            const c = column[u1];
            row[c] = row[c] - m0 * values[u0] - m1 * values[u1];
          }
          p += 2;
          continue;
        }
        let u1 = upperStart[k + 1];
        row[k + 2] = row[k + 2] - m0 * values[u0 + 1] - m1 * values[u1];
        const m2 = row[k + 2] * pivots[k + 2];
        values[p + 2] = m2;
        let u2 = upperStart[k + 2];
        row[k + 3] = row[k + 3] - m0 * values[u0 + 2] - m1 * values[u1 + 1] - m2 * values[u2];
        const m3 = row[k + 3] * pivots[k + 3];
        values[p + 3] = m3;
        u0 += 2;
        u1 += 1;
        for (let u3 = upperStart[k + 3], stop = rowStart[k + 4]; u3 < stop; u3++) {
          u0++;
          u1++;
          u2++;
          const c = column[u3];
          row[c] = row[c] - m0 * values[u0] - m1 * values[u1] - m2 * values[u2] - m3 * values[u3];
        }
        p += 4;
      }
      const pivot = 1 / row[i];
      if (!(Math.abs(pivot) < Infinity)) return false;
      pivots[i] = pivot;
      for (let p = middle + 1; p < end; p++) values[p] = row[column[p]];
    }
    return true;
  }

  /** Solves (d I − J) x = b, b in `x` on entry; a conserved sum of b gives that of x. */
  solve(x: Float64Array): void {
    for (const { closing, species, weights } of this.#structure.sums) {
      let sum = x[closing];
      for (let q = 0; q < species.length; q++) sum -= weights[q] * x[species[q]];
      x[closing] = sum / this.#d;
    }
    this.#substitute(x);
  }

  /** As {@link solve}, for a right side whose conserved sums are 0. */
  solveChange(x: Float64Array): void {
    for (const { closing } of this.#structure.sums) x[closing] = 0;
    this.#substitute(x);
  }

  /** Solves L U x = b. Long rows are summed in four parts, so that additions need not wait for one
   * another. */
  #substitute(x: Float64Array): void {
    const { size, rowStart, column, diagonal } = this.#structure;
    const values = this.#values;
    const pivots = this.#pivots;
    for (let i = 0; i < size; i++) {
      let p = rowStart[i];
      const end = diagonal[i];
      let sum = x[i];
      if (end - p >= 8) {
        let s1 = 0, s2 = 0, s3 = 0;
        for (const stop = end - 3; p < stop; p += 4) {
          sum -= values[p] * x[column[p]];
          s1 -= values[p + 1] * x[column[p + 1]];
          s2 -= values[p + 2] * x[column[p + 2]];
          s3 -= values[p + 3] * x[column[p + 3]];
        }
        sum += s1 + (s2 + s3);
      }
      for (; p < end; p++) sum -= values[p] * x[column[p]];
      x[i] = sum;
    }
    for (let i = size - 1; i >= 0; i--) {
      let p = diagonal[i] + 1;
      const end = rowStart[i + 1];
      let sum = x[i];
      if (end - p >= 8) {
        let s1 = 0, s2 = 0, s3 = 0;
        for (const stop = end - 3; p < stop; p += 4) {
          sum -= values[p] * x[column[p]];
          s1 -= values[p + 1] * x[column[p + 1]];
          s2 -= values[p + 2] * x[column[p + 2]];
          s3 -= values[p + 3] * x[column[p + 3]];
        }
        sum += s1 + (s2 + s3);
      }
      for (; p < end; p++) sum -= values[p] * x[column[p]];
      x[i] = sum * pivots[i];
    }
  }
}

/** How many entries of L from each one on can be eliminated together: their rows k, k + 1 … have the
 * same upper pattern but for the diagonal block. */
function togetherCounts(structure: JacobianStructure): Uint8Array {
  const { size, rowStart, column, diagonal } = structure;
  // follows[k]: row k + 1 has the upper pattern of row k without its first entry, which is k + 1
  const follows = new Uint8Array(size);
  for (let k = 0; k + 1 < size; k++) {
    const u = diagonal[k] + 1;
    const length = rowStart[k + 1] - u;
    if (length === 0 || column[u] !== k + 1) continue;
    const v = diagonal[k + 1] + 1;
    if (rowStart[k + 2] - v !== length - 1) continue;
    let same = 1;
    for (let q = 0; q < length - 1 && same === 1; q++) {
      if (column[u + 1 + q] !== column[v + q]) same = 0;
    }
    follows[k] = same;
  }
  const together = new Uint8Array(column.length).fill(1);
  for (let i = 0; i < size; i++) {
    for (let p = rowStart[i]; p < diagonal[i];) {
      let count = 1;
      while (
        count < 4 && p + count < diagonal[i] && column[p + count] === column[p] + count &&
        follows[column[p] + count - 1] === 1
      ) count++;
      if (count === 3) count = 2;
      together[p] = count;
      p += count;
    }
  }
  return together;
}
