import type { ClosingSum } from "./closing_sums.ts";
import type { ReactionNetwork } from "./reaction_network.ts";

/** Order in which the species are eliminated, so that few entries fill in: at each stage the diagonal
 * pivot with the smallest Markowitz product (r − 1)(c − 1), r and c the entries left in its row and
 * column. Rows and columns are kept as bit sets.
 *
 * Source: H. M. Markowitz, Management Sci. 3 (1957) 255.
 * @param sums conserved sums that stand for the equations of their closing species, which come last
 * @returns for each place the species that stands there */
export function eliminationOrder(
  network: ReactionNetwork,
  sums: readonly ClosingSum[] = [],
): Int32Array {
  const n = network.size;
  const words = (n + 31) >>> 5;
  const rows = new Uint32Array(n * words);
  const columns = new Uint32Array(n * words);
  for (let i = 0; i < n; i++) {
    rows[i * words + (i >>> 5)] |= 1 << (i & 31);
    columns[i * words + (i >>> 5)] |= 1 << (i & 31);
  }
  for (const { reactants, changed } of network.reactions) {
    for (const i of changed) {
      for (const j of reactants) {
        rows[i * words + (j >>> 5)] |= 1 << (j & 31);
        columns[j * words + (i >>> 5)] |= 1 << (i & 31);
      }
    }
  }
  const late = new Uint8Array(n);
  for (const { closing, species } of sums) {
    late[closing] = 1;
    for (const j of species) {
      rows[closing * words + (j >>> 5)] |= 1 << (j & 31);
      columns[j * words + (closing >>> 5)] |= 1 << (closing & 31);
    }
  }
  const rowCount = new Int32Array(n);
  const columnCount = new Int32Array(n);
  for (let i = 0; i < n; i++) {
    rowCount[i] = count(rows, i * words, words);
    columnCount[i] = count(columns, i * words, words);
  }
  const order = new Int32Array(n);
  const left = Int32Array.from({ length: n }, (_, i) => i);
  for (let stage = 0; stage < n; stage++) {
    let best = -1;
    let least = Infinity;
    for (let q = 0; q < n - stage; q++) {
      const i = left[q];
      const product = (rowCount[i] - 1) * (columnCount[i] - 1) + late[i] * 1e12;
      if (product < least || product === least && i < left[best]) {
        least = product;
        best = q;
        if (product === 0) break;
      }
    }
    const pivot = left[best];
    left.copyWithin(best, best + 1, n - stage); // keeps the species in order, so ties are stable
    order[stage] = pivot;
    const pivotRow = pivot * words;
    const bit = 1 << (pivot & 31);
    const word = pivot >>> 5;
    // row i ∪= pivot row for every row that holds the pivot's column, and so for columns
    for (let w = 0; w < words; w++) {
      let members = columns[pivotRow + w];
      while (members !== 0) {
        const i = (w << 5) + 31 - Math.clz32(members);
        members ^= 1 << (i & 31);
        if (i === pivot) continue;
        for (let v = 0; v < words; v++) rows[i * words + v] |= rows[pivotRow + v];
        rows[i * words + word] &= ~bit;
        rowCount[i] = count(rows, i * words, words);
      }
    }
    for (let w = 0; w < words; w++) {
      let members = rows[pivotRow + w];
      while (members !== 0) {
        const j = (w << 5) + 31 - Math.clz32(members);
        members ^= 1 << (j & 31);
        if (j === pivot) continue;
        for (let v = 0; v < words; v++) columns[j * words + v] |= columns[pivotRow + v];
        columns[j * words + word] &= ~bit;
        columnCount[j] = count(columns, j * words, words);
      }
    }
    // the pivot is gone from what is left
    for (let q = 0; q < n - stage - 1; q++) {
      rows[left[q] * words + word] &= ~bit;
      columns[left[q] * words + word] &= ~bit;
    }
  }
  return order;
}

function count(set: Uint32Array, from: number, words: number): number {
  let total = 0;
  for (let w = from; w < from + words; w++) {
    let v = set[w];
    v -= (v >>> 1) & 0x55555555;
    v = (v & 0x33333333) + ((v >>> 2) & 0x33333333);
    total += Math.imul((v + (v >>> 4)) & 0x0f0f0f0f, 0x01010101) >>> 24;
  }
  return total;
}
