import type { ReactionNetwork } from "./reaction_network.ts";

/** A sum of concentrations that no reaction changes: species and their weights. */
export interface ConservedSum {
  readonly species: readonly number[];
  readonly weights: readonly number[];
}

/** Sums that every reaction of a network leaves as they are: a basis of wᵀN = 0, N the net
 * stoichiometric numbers, by Gauss–Jordan elimination of the reactions.
 *
 * @returns one sum for each dimension, whole weights without a common factor, the first positive */
export function conservedSums(network: ReactionNetwork): ConservedSum[] {
  const n = network.size;
  const rows: Map<number, number>[] = [];
  const pivotOf = new Map<number, number>();
  const rowsWith: Set<number>[] = Array.from({ length: n }, () => new Set());
  for (const { changed, change } of network.reactions) {
    const row = new Map<number, number>(changed.map((i, q) => [i, change[q]]));
    for (const i of changed) {
      const pivot = pivotOf.get(i);
      const factor = row.get(i);
      if (pivot !== undefined && factor) addMultiple(row, rows[pivot], -factor);
    }
    let best = -1;
    for (const [i, value] of row) {
      if (
        best < 0 || rowsWith[i].size < rowsWith[best].size ||
        rowsWith[i].size === rowsWith[best].size && Math.abs(value) < Math.abs(row.get(best)!)
      ) best = i;
    }
    if (best < 0) continue;
    const lead = row.get(best)!;
    for (const [i, value] of row) row.set(i, value / lead);
    const index = rows.length;
    for (const other of [...rowsWith[best]]) {
      const target = rows[other];
      const factor = -target.get(best)!;
      for (const i of row.keys()) {
        addTo(target, i, factor * row.get(i)!);
        if (target.has(i)) rowsWith[i].add(other);
        else rowsWith[i].delete(other);
      }
    }
    for (const i of row.keys()) rowsWith[i].add(index);
    rows.push(row);
    pivotOf.set(best, index);
  }
  const sums: ConservedSum[] = [];
  for (let free = 0; free < n; free++) {
    if (pivotOf.has(free)) continue;
    // each row says y_pivot + Σ row y_free = 0 for w: w_pivot = −Σ …, so for this free species
    const entries: [number, number][] = [[free, 1]];
    for (const [pivot, index] of pivotOf) {
      const value = rows[index].get(free);
      if (value) entries.push([pivot, -value]);
    }
    entries.sort((a, b) => a[0] - b[0]);
    const weights = wholeNumbers(entries.map(([, w]) => w));
    sums.push({ species: entries.map(([i]) => i), weights });
  }
  return sums;
}

function addMultiple(
  row: Map<number, number>,
  other: ReadonlyMap<number, number>,
  factor: number,
): void {
  for (const [i, value] of other) addTo(row, i, factor * value);
}

/** Adds to an entry; what is left of a difference by rounding counts as 0. */
function addTo(row: Map<number, number>, i: number, value: number): void {
  const before = row.get(i) ?? 0;
  const after = before + value;
  if (Math.abs(after) <= 1e-9 * Math.max(Math.abs(before), Math.abs(value))) row.delete(i);
  else row.set(i, after);
}

function wholeNumbers(weights: readonly number[]): number[] {
  let scale = 1;
  for (; scale <= 720; scale++) {
    if (weights.every((w) => Math.abs(w * scale - Math.round(w * scale)) < 1e-6)) break;
  }
  const whole = scale <= 720 ? weights.map((w) => Math.round(w * scale)) : [...weights];
  const sign = whole.filter((w) => w < 0).length > whole.length / 2 ? -1 : 1;
  return whole.map((w) => sign * w);
}
