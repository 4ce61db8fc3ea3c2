import type { Mechanism } from "../mechanism/mechanism.ts";

/** One direction of a step, as the kernels see it: v = k ∏ y[reactants], dy[changed] += change v. */
export interface Reaction {
  /** Species that react, each as often as its stoichiometric number. */
  readonly reactants: readonly number[];
  /** Species whose amount the reaction changes. */
  readonly changed: readonly number[];
  /** By how much, products less reactants, one for each of `changed`. */
  readonly change: readonly number[];
}

/** Mass-action reactions over numbered species: the form from which every kernel is made.
 *
 * A flow, a dosing or a dilution is a reaction of order 0 or 1 whose coefficient depends on time; a
 * clamped species is one that no reaction changes. */
export interface ReactionNetwork {
  /** Number of species. */
  readonly size: number;
  /** The reactions. */
  readonly reactions: readonly Reaction[];
}

/** A reaction's place in the mechanism it came from. */
export interface ReactionOrigin {
  /** Index of the step, from 0. */
  readonly step: number;
  /** Whether it is the step's reverse direction. */
  readonly reverse: boolean;
  /** Index of its symbol in `mechanism.rateConstants`. */
  readonly rateConstant: number;
}

/** The network of a mechanism, species numbered as in `mechanism.species`, and the origin of each
 * reaction: forward, then reverse where the step has one, in the order of the steps. */
export function networkOf(
  mechanism: Mechanism,
): { network: ReactionNetwork; origins: ReactionOrigin[] } {
  const speciesIndex = new Map(mechanism.species.map((name, i) => [name, i]));
  const symbolIndex = new Map(mechanism.rateConstants.map((name, i) => [name, i]));
  const reactions: Reaction[] = [];
  const origins: ReactionOrigin[] = [];
  mechanism.steps.forEach((step, i) => {
    const left: number[] = [];
    const right: number[] = [];
    const net = new Map<number, number>();
    for (const { species, coefficient } of step.reactants) {
      const index = speciesIndex.get(species)!;
      for (let c = 0; c < coefficient; c++) left.push(index);
      net.set(index, -coefficient);
    }
    for (const { species, coefficient } of step.products) {
      const index = speciesIndex.get(species)!;
      if (step.reverseRateConstant !== undefined) {
        for (let c = 0; c < coefficient; c++) right.push(index);
      }
      net.set(index, (net.get(index) ?? 0) + coefficient);
    }
    const changed: number[] = [];
    const change: number[] = [];
    for (const [index, amount] of net) {
      if (amount !== 0) {
        changed.push(index);
        change.push(amount);
      }
    }
    reactions.push({ reactants: left, changed, change });
    origins.push({ step: i, reverse: false, rateConstant: symbolIndex.get(step.rateConstant)! });
    if (step.reverseRateConstant !== undefined) {
      reactions.push({ reactants: right, changed, change: change.map((c) => -c) });
      origins.push({
        step: i,
        reverse: true,
        rateConstant: symbolIndex.get(step.reverseRateConstant)!,
      });
    }
  });
  return { network: { size: mechanism.species.length, reactions }, origins };
}

/** The same network with species renumbered: species i becomes `place[i]`. */
export function renumber(network: ReactionNetwork, place: Int32Array): ReactionNetwork {
  return {
    size: network.size,
    reactions: network.reactions.map(({ reactants, changed, change }) => ({
      reactants: reactants.map((i) => place[i]),
      changed: changed.map((i) => place[i]),
      change,
    })),
  };
}

/** For each species, the reactions that change it and by how much. */
export function changesBySpecies(network: ReactionNetwork): [number, number][][] {
  const lists: [number, number][][] = Array.from({ length: network.size }, () => []);
  network.reactions.forEach(({ changed, change }, j) => {
    changed.forEach((i, q) => lists[i].push([change[q], j]));
  });
  return lists;
}
