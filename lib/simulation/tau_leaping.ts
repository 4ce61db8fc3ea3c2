import type { StochasticModel } from "./stochastic_model.ts";

/** How far tau-leaping may go in one leap. */
export interface TauLeaping {
  /** Largest relative change of a propensity in one leap. */
  readonly epsilon: number;
  /** A reaction is critical if so few events use up one of its reactants. */
  readonly criticalEvents: number;
  /** Highest order of a reaction in which each species reacts, and how many of it at once. */
  readonly order: readonly { readonly order: number; readonly self: number }[];
}

/** The leap conditions of a model.
 *
 * @param model the model @param epsilon largest relative change of a propensity in one leap */
export function tauLeaping(model: StochasticModel, epsilon: number): TauLeaping {
  const order = Array.from({ length: model.size }, () => ({ order: 0, self: 0 }));
  for (const list of model.reactants) {
    const total = list.reduce((sum, [, count]) => sum + count, 0);
    for (const [species, self] of list) {
      const known = order[species];
      if (total > known.order || (total === known.order && self > known.self)) {
        order[species] = { order: total, self };
      }
    }
  }
  return { epsilon, criticalEvents: 10, order };
}

/** The longest leap over which mean and variance of each reactant's change stay within ε·x/g, and which
 * reactions are critical.
 *
 * Source: Y. Cao, D. T. Gillespie & L. R. Petzold, J. Chem. Phys. 124 (2006) 044109, eqs. 32, 33. */
export function leapLength(
  model: StochasticModel,
  counts: Float64Array,
  a: Float64Array,
  leaping: TauLeaping,
): { tau: number; critical: boolean[] } {
  const critical = model.changes.map((change, j) =>
    a[j] > 0 &&
    change.some(([species, by]) =>
      by < 0 && Math.floor(counts[species] / -by) < leaping.criticalEvents
    )
  );
  const mean = new Float64Array(model.size);
  const variance = new Float64Array(model.size);
  model.changes.forEach((change, j) => {
    if (critical[j]) return;
    for (const [species, by] of change) {
      mean[species] += by * a[j];
      variance[species] += by * by * a[j];
    }
  });
  let tau = Infinity;
  for (let i = 0; i < model.size; i++) {
    if (leaping.order[i].order === 0) continue;
    const room = Math.max(leaping.epsilon * counts[i] / factorOf(leaping.order[i], counts[i]), 1);
    if (mean[i] !== 0) tau = Math.min(tau, room / Math.abs(mean[i]));
    if (variance[i] !== 0) tau = Math.min(tau, room * room / variance[i]);
  }
  return { tau, critical };
}

/** g of a reactant: by how much a relative change of its number is magnified in the propensity. */
function factorOf({ order, self }: { order: number; self: number }, n: number): number {
  if (order === 1) return 1;
  if (order === 2) return self === 2 ? 2 + 1 / Math.max(n - 1, 1) : 2;
  if (self === 3) return 3 + 1 / Math.max(n - 1, 1) + 2 / Math.max(n - 2, 1);
  if (self === 2) return 1.5 * (2 + 1 / Math.max(n - 1, 1));
  return order;
}
