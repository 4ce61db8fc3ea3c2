import { Mechanism } from "../mechanism/mechanism.ts";
import * as option from "../quantity/options.ts";
import { RandomVariates } from "./random_variates.ts";
import { networkOf } from "./reaction_network.ts";
import {
  directMethod,
  nextReactionMethod,
  type StochasticState,
  type StochasticStepper,
  tauLeapingMethod,
} from "./stochastic_methods.ts";
import { type StochasticModel, stochasticModel } from "./stochastic_model.ts";
import { StochasticTrajectory } from "./stochastic_trajectory.ts";
import { tauLeaping } from "./tau_leaping.ts";

/** How {@link simulateStochastic} simulates. */
export interface SimulateStochasticOptions {
  /** Rate constants by symbol. Without a volume: stochastic constants per s and distinct set of reactants. With
   * one: constants of concentrations, in mol/L and s. */
  rateConstants: Record<string, number>;
  /** Copy numbers at time 0 by species; 0 where left out. */
  initial: Record<string, number>;
  /** Times of output, s, ascending from 0 or later. */
  times: number[];
  /** Volume, L, or text with its unit. */
  volume?: number | string;
  /** "direct" and "next-reaction" are exact; "tau-leaping" takes many events at once.
   * @default {"direct"} */
  method?: "direct" | "next-reaction" | "tau-leaping";
  /** Largest relative change of a propensity in one leap, for tau-leaping.
   * @default {0.03} */
  epsilon?: number;
  /** Seed: the same one gives the same numbers everywhere.
   * @default {1} */
  seed?: number;
  /** Most steps; the simulation then ends unfinished.
   * @default {1e8} */
  maxSteps?: number;
  /** Ends the simulation, unfinished. */
  signal?: AbortSignal;
}

const MAX_STEPS = 1e8;
const EPSILON = 0.03;

/** Simulates single events of a mechanism with small copy numbers.
 *
 * Source: D. T. Gillespie, J. Phys. Chem. 81 (1977) 2340; M. A. Gibson & J. Bruck, J. Phys. Chem. A 104
 * (2000) 1876; Y. Cao, D. T. Gillespie & L. R. Petzold, J. Chem. Phys. 124 (2006) 044109.
 *
 * @param mechanism the mechanism
 * @param options constants, copy numbers, times, method, seed
 * @returns copy numbers at the times; marked if unfinished
 * @throws {TypeError} on options of the wrong type
 * @throws {RangeError} on a constant that is missing or negative, a species or symbol that the mechanism does
 * not have, a copy number that is no whole number, times that run backwards, or a third body
 * @example
 * ```ts
 * import { ok } from "node:assert";
 * import { mechanism, simulateStochastic } from "ratebook";
 *
 * const decay = mechanism`A ->[k] B`;
 * const run = simulateStochastic(decay, {
 *   rateConstants: { k: 0.1 },
 *   initial: { A: 1000 },
 *   times: [0, 10],
 * });
 * ok(Math.abs(run.count("A")[1] - 368) < 80); // 1000·exp(−1), standard deviation 15
 * ``` */
export function simulateStochastic(
  mechanism: Mechanism,
  options: SimulateStochasticOptions,
): StochasticTrajectory {
  if (!(mechanism instanceof Mechanism)) {
    throw new TypeError(`Cannot simulate ${String(mechanism)}: expected a mechanism`);
  }
  const read = option.readOptions("simulateStochastic", options, {
    rateConstants: option.record(option.number({ min: 0 })),
    initial: option.record(option.integer(0)),
    times: option.list(option.number({ min: 0 })),
    volume: option.quantity("L", { above: 0 }),
    method: option.oneOf("direct", "next-reaction", "tau-leaping"),
    epsilon: option.number({ min: 1e-4, max: 0.5 }),
    seed: option.integer(-(2 ** 31)),
    maxSteps: option.integer(1),
    signal: option.instance(AbortSignal),
  });
  const { method = "direct", seed = 1, maxSteps = MAX_STEPS, times = [] } = read;
  refuseThirdBody(mechanism);
  times.forEach((time, i) => {
    if (i === 0 || time >= times[i - 1]) return;
    throw new RangeError(
      `Cannot simulate: time runs backwards at output ${i}, from ${times[i - 1]} to ${time} s`,
    );
  });
  const { network, origins } = networkOf(mechanism);
  const constants = valuesOf(read.rateConstants, mechanism.rateConstants, "rate constant");
  const model = stochasticModel(
    network,
    Float64Array.from(origins, ({ rateConstant }) => constants[rateConstant]),
    read.volume,
  );
  const initial = valuesOf(read.initial, mechanism.species, "species", 0);
  const state: StochasticState = { time: 0, counts: Float64Array.from(initial), events: 0 };
  const stepper = makeStepper(
    method,
    model,
    state,
    new RandomVariates(seed),
    read.epsilon ?? EPSILON,
  );
  const rows: Float64Array[] = [];
  let steps = 0;
  let reason = "all output times were reached";
  let finished = true;
  outputs: for (const time of times) {
    while (stepper(state, time) <= time) {
      steps++;
      if (steps >= maxSteps) {
        reason =
          `stopped after ${steps} steps at t = ${state.time} s; raise maxSteps or take tau-leaping`;
        finished = false;
        break outputs;
      }
      if ((steps & 1023) === 0 && read.signal?.aborted) {
        reason = `aborted at t = ${state.time} s`;
        finished = false;
        break outputs;
      }
      if (state.time >= time) break;
    }
    rows.push(Float64Array.from(state.counts));
  }
  return new StochasticTrajectory({
    species: mechanism.species,
    times: Float64Array.from(times.slice(0, rows.length)),
    rows,
    events: state.events,
    steps,
    finished,
    reason,
    seed,
    method,
  });
}

function makeStepper(
  method: "direct" | "next-reaction" | "tau-leaping",
  model: StochasticModel,
  state: StochasticState,
  random: RandomVariates,
  epsilon: number,
): StochasticStepper {
  switch (method) {
    case "direct":
      return directMethod(model, state, random);
    case "next-reaction":
      return nextReactionMethod(model, state, random);
    case "tau-leaping":
      return tauLeapingMethod(model, random, tauLeaping(model, epsilon));
  }
}

function refuseThirdBody(mechanism: Mechanism): void {
  const step = mechanism.steps.find((step) => step.thirdBody);
  if (!step) return;
  throw new RangeError(
    `Cannot simulate events of step ${step.number}: its third body M has no copy number; write M as a ` +
      `species, or put its concentration into the rate constant`,
  );
}

/** Values by name in the order of the names; every name must be known, and given unless there is a default. */
function valuesOf(
  given: Readonly<Record<string, number>> | undefined,
  names: readonly string[],
  what: string,
  missing?: number,
): number[] {
  const unknown = Object.keys(given ?? {}).find((name) => !names.includes(name));
  if (unknown !== undefined) {
    throw new RangeError(
      `Cannot simulate: the mechanism has no ${what} "${unknown}"; it has ${names.join(", ")}`,
    );
  }
  return names.map((name) => {
    const value = given?.[name] ?? missing;
    if (value !== undefined) return value;
    throw new RangeError(
      `Cannot simulate: the ${what} "${name}" has no value; give it in the options`,
    );
  });
}
