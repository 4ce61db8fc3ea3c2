import type { ClosingSum } from "./closing_sums.ts";
import type { ReactionNetwork } from "./reaction_network.ts";

/** Where the entries of J = ∂f/∂y and of the factors of I/(hγ) − J stand, rows in order, and which
 * partial derivative of which reaction goes where. Species are numbered in elimination order. */
export interface JacobianStructure {
  /** Number of species. */
  readonly size: number;
  /** Row i of the factors is at rowStart[i] … rowStart[i + 1] − 1. */
  readonly rowStart: Int32Array;
  /** Column of each entry of the factors, ascending in a row. */
  readonly column: Int32Array;
  /** Where the diagonal of each row is. */
  readonly diagonal: Int32Array;
  /** Where each entry of J is among the factors; −1 in the row of a closing species. */
  readonly place: Int32Array;
  /** Row i of J is at jacobianStart[i] … jacobianStart[i + 1] − 1. */
  readonly jacobianStart: Int32Array;
  /** Column of each entry of J. */
  readonly jacobianColumn: Int32Array;
  /** Reaction of each partial derivative ∂v/∂y. */
  readonly partialReaction: Int32Array;
  /** Species of each partial derivative. */
  readonly partialSpecies: Int32Array;
  /** Order of the reaction in that species: ∂v/∂y = order k y^(order−1) ∏ others. */
  readonly partialOrder: Int32Array;
  /** Partial p goes to entries targetStart[p] … targetStart[p + 1] − 1 of `target`. */
  readonly targetStart: Int32Array;
  /** Entry of J. */
  readonly target: Int32Array;
  /** With which factor. */
  readonly targetFactor: Float64Array;
  /** Conserved sums that stand for the equations of their closing species. */
  readonly sums: readonly ClosingSum[];
  /** Index of the sum in whose row each species is the closing one; −1 for all others. */
  readonly sumOf: Int32Array;
}

/** Symbolic factorization: once for a mechanism, whatever its rate constants.
 *
 * Source: row-wise elimination, T. A. Davis, Direct methods for sparse linear systems, SIAM 2006,
 * ch. 6.
 * @param network species numbered in elimination order
 * @param sums conserved sums that stand for the equations of their closing species */
export function jacobianStructure(
  network: ReactionNetwork,
  sums: readonly ClosingSum[] = [],
): JacobianStructure {
  const n = network.size;
  const partialReaction: number[] = [];
  const partialSpecies: number[] = [];
  const partialOrder: number[] = [];
  const targetStart = [0];
  const targetRow: number[] = [];
  const targetFactor: number[] = [];
  const columnsOf: Set<number>[] = Array.from({ length: n }, () => new Set());
  network.reactions.forEach(({ reactants, changed, change }, j) => {
    for (let a = 0; a < reactants.length; a++) {
      const s = reactants[a];
      if (reactants.indexOf(s) !== a) continue;
      let order = 0;
      for (const r of reactants) if (r === s) order++;
      partialReaction.push(j);
      partialSpecies.push(s);
      partialOrder.push(order);
      for (let q = 0; q < changed.length; q++) {
        columnsOf[changed[q]].add(s);
        targetRow.push(changed[q]);
        targetFactor.push(change[q]);
      }
      targetStart.push(targetRow.length);
    }
  });
  const jacobianStart = new Int32Array(n + 1);
  const sorted = columnsOf.map((set) => Int32Array.from(set).sort());
  for (let i = 0; i < n; i++) jacobianStart[i + 1] = jacobianStart[i] + sorted[i].length;
  const jacobianColumn = new Int32Array(jacobianStart[n]);
  sorted.forEach((columns, i) => jacobianColumn.set(columns, jacobianStart[i]));

  const sumOf = new Int32Array(n).fill(-1);
  sums.forEach(({ closing }, s) => sumOf[closing] = s);
  const factors = factorPattern(
    sorted.map((columns, i) => sumOf[i] < 0 ? columns : Int32Array.from(sums[sumOf[i]].species)),
  );
  const place = new Int32Array(jacobianColumn.length);
  const slot = new Int32Array(n);
  const target = new Int32Array(targetRow.length);
  const entryAt = new Map<number, number>();
  for (let i = 0; i < n; i++) {
    for (let p = factors.rowStart[i]; p < factors.rowStart[i + 1]; p++) slot[factors.column[p]] = p;
    for (let q = jacobianStart[i]; q < jacobianStart[i + 1]; q++) {
      place[q] = sumOf[i] < 0 ? slot[jacobianColumn[q]] : -1;
      entryAt.set(i * n + jacobianColumn[q], q);
    }
  }
  for (let p = 0; p < partialSpecies.length; p++) {
    for (let q = targetStart[p]; q < targetStart[p + 1]; q++) {
      target[q] = entryAt.get(targetRow[q] * n + partialSpecies[p])!;
    }
  }
  return {
    size: n,
    ...factors,
    place,
    jacobianStart,
    jacobianColumn,
    partialReaction: Int32Array.from(partialReaction),
    partialSpecies: Int32Array.from(partialSpecies),
    partialOrder: Int32Array.from(partialOrder),
    targetStart: Int32Array.from(targetStart),
    target,
    targetFactor: Float64Array.from(targetFactor),
    sums,
    sumOf,
  };
}

/** Pattern of L and U together: row i is the union of its own entries and of the upper parts of the
 * rows it is reduced by. */
function factorPattern(
  rows: readonly Int32Array[],
): { rowStart: Int32Array; column: Int32Array; diagonal: Int32Array } {
  const n = rows.length;
  const upper: Int32Array[] = [];
  const rowStart = new Int32Array(n + 1);
  const diagonal = new Int32Array(n);
  const columns: Int32Array[] = [];
  const mark = new Uint8Array(n);
  for (let i = 0; i < n; i++) {
    mark.fill(0);
    mark[i] = 1;
    for (const j of rows[i]) mark[j] = 1;
    let length = 0;
    let lower = 0;
    for (let k = 0; k < n; k++) {
      if (mark[k] === 0) continue;
      length++;
      if (k >= i) continue;
      lower++;
      const above = upper[k];
      for (let q = 0; q < above.length; q++) {
        if (mark[above[q]] === 0) {
          mark[above[q]] = 1;
        }
      }
    }
    // entries marked below k while at k are impossible: upper parts only reach to the right
    const row = new Int32Array(length);
    let q = 0;
    for (let k = 0; k < n; k++) if (mark[k] === 1) row[q++] = k;
    diagonal[i] = rowStart[i] + lower;
    rowStart[i + 1] = rowStart[i] + length;
    columns.push(row);
    upper.push(row.subarray(lower + 1));
  }
  const column = new Int32Array(rowStart[n]);
  columns.forEach((row, i) => column.set(row, rowStart[i]));
  return { rowStart, column, diagonal };
}
