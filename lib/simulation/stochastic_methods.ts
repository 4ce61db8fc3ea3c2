import { EventClock } from "./event_clock.ts";
import type { RandomVariates } from "./random_variates.ts";
import { fire, propensity, type StochasticModel } from "./stochastic_model.ts";
import { leapLength, type TauLeaping } from "./tau_leaping.ts";

/** A state of a stochastic simulation that a method moves on. */
export interface StochasticState {
  /** Time, s. */
  time: number;
  /** Copy numbers. */
  readonly counts: Float64Array;
  /** Reaction events so far. */
  events: number;
}

/** Moves a state on: finds the time of the next change and carries it out if it is not after `until`.
 * Returns the new time, or `Infinity` if nothing changes up to `until` (the state is then left as it is). */
export type StochasticStepper = (state: StochasticState, until: number) => number;

/** The direct method: one exponential waiting time for the sum of all propensities, one uniform number for
 * which reaction it is.
 *
 * Source: D. T. Gillespie, J. Phys. Chem. 81 (1977) 2340. */
export function directMethod(
  model: StochasticModel,
  state: StochasticState,
  random: RandomVariates,
): StochasticStepper {
  const a = Float64Array.from(model.constants, (_, j) => propensity(model, j, state.counts));
  let waiting: number | undefined;
  return (state, until) => {
    let total = 0;
    for (const value of a) total += value;
    if (total <= 0) return Infinity;
    // A waiting time that ends after `until` is kept: drawing again would be right too, but wasteful.
    waiting ??= state.time + random.exponential() / total;
    if (waiting > until) return Infinity;
    let left = random.uniform() * total;
    let chosen = 0;
    while (chosen < a.length - 1 && left >= a[chosen]) left -= a[chosen++];
    while (a[chosen] <= 0) chosen--;
    fire(model, chosen, state.counts);
    for (const j of model.affected[chosen]) a[j] = propensity(model, j, state.counts);
    state.time = waiting;
    state.events++;
    waiting = undefined;
    return state.time;
  };
}

/** The next-reaction method: a waiting time for each reaction in a heap; after an event only the reactions
 * it affects get a new time, rescaled from the old one, so that one random number an event is enough.
 *
 * Source: M. A. Gibson & J. Bruck, J. Phys. Chem. A 104 (2000) 1876. */
export function nextReactionMethod(
  model: StochasticModel,
  state: StochasticState,
  random: RandomVariates,
): StochasticStepper {
  const a = Float64Array.from(model.constants, (_, j) => propensity(model, j, state.counts));
  const clock = new EventClock(
    Float64Array.from(
      a,
      (value) => value > 0 ? state.time + random.exponential() / value : Infinity,
    ),
  );
  return (state, until) => {
    const chosen = clock.first;
    const time = clock.timeOf(chosen);
    if (!(time <= until)) return Infinity;
    fire(model, chosen, state.counts);
    state.time = time;
    state.events++;
    let drawn = false;
    for (const j of model.affected[chosen]) {
      const before = a[j];
      a[j] = propensity(model, j, state.counts);
      if (j === chosen) drawn = true;
      if (j === chosen || before <= 0) {
        clock.set(j, a[j] > 0 ? time + random.exponential() / a[j] : Infinity);
      } else {
        clock.set(j, a[j] > 0 ? time + before / a[j] * (clock.timeOf(j) - time) : Infinity);
      }
    }
    if (!drawn) {
      clock.set(chosen, a[chosen] > 0 ? time + random.exponential() / a[chosen] : Infinity);
    }
    return time;
  };
}

/** Adaptive tau-leaping: many events in one leap as long as no propensity changes by more than a small share,
 * exact single events where a reactant is nearly used up or a leap would hold few events. Of first order: within
 * a leap the propensities stay what they were, so that a decay runs ahead by the share ε/2 per lifetime.
 *
 * Source: Y. Cao, D. T. Gillespie & L. R. Petzold, J. Chem. Phys. 124 (2006) 044109. */
export function tauLeapingMethod(
  model: StochasticModel,
  random: RandomVariates,
  leaping: TauLeaping,
): StochasticStepper {
  const count = model.constants.length;
  const a = new Float64Array(count);
  const before = new Float64Array(model.size);
  let exactSteps = 0;
  return (state, until) => {
    let total = 0;
    for (let j = 0; j < count; j++) total += a[j] = propensity(model, j, state.counts);
    if (total <= 0) return Infinity;
    let { tau, critical } = leapLength(model, state.counts, a, leaping);
    if (exactSteps === 0 && tau < FEW_EVENTS / total) exactSteps = EXACT_STEPS;
    if (exactSteps > 0) {
      exactSteps--;
      const time = state.time + random.exponential() / total;
      if (time > until) return Infinity;
      fire(model, choose(a, random.uniform() * total), state.counts);
      state.time = time;
      state.events++;
      return time;
    }
    before.set(state.counts);
    for (;;) {
      let criticalTotal = 0;
      for (let j = 0; j < count; j++) if (critical[j]) criticalTotal += a[j];
      const next = criticalTotal > 0 ? random.exponential() / criticalTotal : Infinity;
      const leap = Math.min(tau, next, until - state.time);
      let events = 0;
      for (let j = 0; j < count; j++) {
        if (critical[j] || a[j] === 0) continue;
        const times = random.poisson(a[j] * leap);
        fire(model, j, state.counts, times);
        events += times;
      }
      if (next <= Math.min(tau, until - state.time)) {
        const only = a.map((value, j) => critical[j] ? value : 0);
        fire(model, choose(only, random.uniform() * criticalTotal), state.counts);
        events++;
      }
      if (state.counts.every((n) => n >= 0)) {
        state.time += leap;
        state.events += events;
        return state.time;
      }
      // A leap that took more than there was is taken back and halved.
      state.counts.set(before);
      tau /= 2;
    }
  };
}

/** Reactions get exact events for this many steps where a leap would hold fewer events than FEW_EVENTS. */
const EXACT_STEPS = 100;
const FEW_EVENTS = 10;

function choose(a: Float64Array, left: number): number {
  let chosen = 0;
  while (chosen < a.length - 1 && left >= a[chosen]) left -= a[chosen++];
  while (chosen > 0 && a[chosen] <= 0) chosen--;
  return chosen;
}
