import { type ConservedSum, conservedSums } from "./conserved_quantities.ts";
import type { ReactionNetwork } from "./reaction_network.ts";

/** A conserved sum that gives one concentration from others without loss of digits:
 * y_closing = total + Σ weight y_species, every weight positive. */
export interface ClosingSum {
  /** Species that the sum gives. */
  readonly closing: number;
  /** The other species. */
  readonly species: readonly number[];
  /** Their weights, all positive. */
  readonly weights: readonly number[];
}

/** The conserved sums in which one species stands against all others, such as a cation against the
 * anions. Where all start from 0, the concentrations can fall by many orders of magnitude while their
 * difference must stay 0: then the sum, not the sum of its changes, must make the closing species.
 *
 * A species closes one sum at most and is in no other one. */
export function closingSums(network: ReactionNetwork): ClosingSum[] {
  const found: ClosingSum[] = [];
  for (const sum of candidates(conservedSums(network))) {
    const closing = closingOf(sum);
    if (!closing) continue;
    const clashes = found.some((other) =>
      other.closing === closing.closing || other.species.includes(closing.closing) ||
      closing.species.includes(other.closing)
    );
    if (!clashes) found.push(closing);
  }
  return found;
}

/** Most sums of a basis that are combined in pairs. */
const MOST_COMBINED = 12;

/** The sums of a basis, and those made of two by removing a species they share; shortest first. */
function candidates(basis: readonly ConservedSum[]): ConservedSum[] {
  const all = [...basis];
  if (basis.length <= MOST_COMBINED) {
    for (let a = 0; a < basis.length; a++) {
      for (let b = a + 1; b < basis.length; b++) {
        const shared = basis[a].species.filter((i) => basis[b].species.includes(i));
        const seen = new Set<number>();
        for (const i of shared) {
          const ratio = weightOf(basis[a], i) / weightOf(basis[b], i);
          if (!seen.has(ratio)) all.push(difference(basis[a], basis[b], ratio));
          seen.add(ratio);
        }
      }
    }
  }
  return all.sort((a, b) => a.species.length - b.species.length);
}

function weightOf(sum: ConservedSum, species: number): number {
  const at = sum.species.indexOf(species);
  return at < 0 ? 0 : sum.weights[at];
}

/** a − ratio b, without what cancels. */
function difference(a: ConservedSum, b: ConservedSum, ratio: number): ConservedSum {
  const species = [...new Set([...a.species, ...b.species])].sort((i, j) => i - j)
    .filter((i) => weightOf(a, i) !== ratio * weightOf(b, i));
  return { species, weights: species.map((i) => weightOf(a, i) - ratio * weightOf(b, i)) };
}

function closingOf({ species, weights }: ConservedSum): ClosingSum | undefined {
  const positive = weights.filter((w) => w > 0).length;
  const sign = positive === 1 ? 1 : weights.length - positive === 1 ? -1 : 0;
  if (sign === 0 || species.length < 2) return undefined;
  const at = weights.findIndex((w) => Math.sign(w) === sign);
  return {
    closing: species[at],
    species: species.filter((_, q) => q !== at),
    weights: weights.filter((_, q) => q !== at).map((w) => Math.abs(w / weights[at])),
  };
}

/** Whether every total of the sums is 0 or positive in a state, so that no digits are lost. */
export function canClose(sums: readonly ClosingSum[], y: Float64Array): boolean {
  return sums.every((sum) => totalOf(sum, y) >= 0);
}

/** The total of a sum in a state. */
export function totalOf(sum: ClosingSum, y: Float64Array): number {
  let total = y[sum.closing];
  for (let q = 0; q < sum.species.length; q++) total -= sum.weights[q] * y[sum.species[q]];
  return total;
}

/** Sets the closing species of a state. */
export function close(
  sums: readonly ClosingSum[],
  totals: Float64Array,
  y: Float64Array,
): void {
  for (let s = 0; s < sums.length; s++) {
    const { closing, species, weights } = sums[s];
    let value = totals[s];
    for (let q = 0; q < species.length; q++) value += weights[q] * y[species[q]];
    y[closing] = value;
  }
}

/** The same sums with species renumbered: species i becomes `place[i]`. */
export function renumberSums(sums: readonly ClosingSum[], place: Int32Array): ClosingSum[] {
  return sums.map(({ closing, species, weights }) => ({
    closing: place[closing],
    species: species.map((i) => place[i]),
    weights,
  }));
}
