import { AVOGADRO_CONSTANT } from "../quantity/constants.ts";
import type { ReactionNetwork } from "./reaction_network.ts";

/** A reaction network over copy numbers: what each event takes and gives, and how probable it is. */
export interface StochasticModel {
  /** Number of species. */
  readonly size: number;
  /** For each reaction the species that react, and how many of each at once. */
  readonly reactants: readonly (readonly (readonly [species: number, count: number])[])[];
  /** For each reaction the species it changes, and by how many. */
  readonly changes: readonly (readonly (readonly [species: number, change: number])[])[];
  /** Stochastic rate constant of each reaction, per s and per distinct set of reactants. */
  readonly constants: Float64Array;
  /** For each reaction the reactions whose propensity it changes, itself among them if it does. */
  readonly affected: readonly (readonly number[])[];
}

/** The stochastic model of a network: propensity a = c·∏ C(n, ν) with C the number of ways to pick ν of n.
 *
 * With a volume V the constants k are those of concentrations, and c = k·∏ν!·(N_A V)^(1−m) for
 * molecularity m; without one they are taken as the stochastic constants c themselves.
 *
 * Source: D. T. Gillespie, J. Phys. Chem. 81 (1977) 2340.
 *
 * @param network the reactions @param k constant of each reaction @param volume L, or none */
export function stochasticModel(
  network: ReactionNetwork,
  k: Float64Array,
  volume: number | undefined,
): StochasticModel {
  const reactants = network.reactions.map(({ reactants }) => {
    const counts = new Map<number, number>();
    for (const species of reactants) counts.set(species, (counts.get(species) ?? 0) + 1);
    return [...counts];
  });
  const changes = network.reactions.map(({ changed, change }) =>
    changed.map((species, i) => [species, change[i]] as const)
  );
  const constants = Float64Array.from(network.reactions, ({ reactants: list }, j) => {
    if (volume === undefined) return k[j];
    let factor = (AVOGADRO_CONSTANT * volume) ** (1 - list.length);
    for (const [, count] of reactants[j]) for (let i = 2; i <= count; i++) factor *= i;
    return k[j] * factor;
  });
  const affected = changes.map((change) => {
    const touched = new Set(change.map(([species]) => species));
    return reactants.flatMap((list, j) =>
      list.some(([species]) => touched.has(species)) ? [j] : []
    );
  });
  return { size: network.size, reactants, changes, constants, affected };
}

/** Propensity of a reaction at copy numbers, per s. */
export function propensity(model: StochasticModel, reaction: number, counts: Float64Array): number {
  let a = model.constants[reaction];
  for (const [species, count] of model.reactants[reaction]) {
    const n = counts[species];
    if (n < count) return 0;
    // C(n, ν)
    for (let i = 0; i < count; i++) a *= (n - i) / (i + 1);
  }
  return a;
}

/** Carries out a number of events of a reaction on copy numbers. */
export function fire(
  model: StochasticModel,
  reaction: number,
  counts: Float64Array,
  times = 1,
): void {
  for (const [species, change] of model.changes[reaction]) counts[species] += change * times;
}
