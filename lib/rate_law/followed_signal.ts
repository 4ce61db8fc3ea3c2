import { readQuantity } from "../quantity/read_quantity.ts";
import type { Quantity } from "../quantity/read_quantity.ts";
import type { Run } from "../run/run.ts";

/** How the end value of a signal is treated: "free" to be fitted, or its known value. */
export type EndValue = "free" | Quantity;

/** One run's signal made ready for a fit: only readings that count, in the order of time. */
export interface FollowedSignal {
  /** The run's id. */
  readonly run: string;
  /** Name of the signal. */
  readonly name: string;
  /** Whether the signal is the reactant's concentration itself, in mol/L. */
  readonly isConcentration: boolean;
  /** Canonical unit of the values. */
  readonly unit: string;
  /** Times, s. */
  readonly times: Float64Array;
  /** Readings, canonical unit. */
  readonly values: Float64Array;
  /** Square roots of the weights: 1/u(reading), or 1. */
  readonly rootWeights: Float64Array;
  /** Known end value, or `undefined` for one that is fitted. */
  readonly endValue?: number;
  /** Initial concentration of the reactant behind a raw signal, mol/L, where known. */
  readonly initialConcentration?: number;
  /** Name of the reactant: the signal's own where it is a concentration. */
  readonly reactant: string;
  /** Temperature, K, where known. */
  readonly temperature?: number;
  /** Readings that were censored or left out. */
  readonly leftOut: number;
}

/** How to find and treat the signal. */
export interface FollowOptions {
  /** Name of the signal or species; needed where a run has several. */
  readonly species?: string;
  /** End value; by default free for a raw signal and 0 for a concentration. */
  readonly endValue?: EndValue;
  /** Species whose initial concentration stands behind a raw signal; needed where several are given. */
  readonly reactant?: string;
}

/** Picks a run's signal and drops readings that have no value.
 *
 * @throws {RangeError} if the signal or its run has too little in it, or a known end value does not
 * fit the signal's unit */
export function followSignal(run: Run, options: FollowOptions): FollowedSignal {
  const signal = run.signal(options.species);
  const isConcentration = signal.quantity === "concentration";
  const kept: number[] = [];
  signal.values.forEach((value, i) => {
    if (Number.isFinite(value) && !run.isExcluded(i)) kept.push(i);
  });
  if (kept.length < 3) {
    throw new RangeError(
      `Cannot fit a rate law to run "${run.id}": "${signal.name}" has ${kept.length} readings with a ` +
        `value and at least 3 are needed; add readings or leave the run out with runs.filter(...)`,
    );
  }
  const uncertainties = signal.standardUncertainties;
  return {
    run: run.id,
    name: signal.name,
    isConcentration,
    unit: signal.unit,
    times: Float64Array.from(kept, (i) => run.times[i]),
    values: Float64Array.from(kept, (i) => signal.values[i]),
    rootWeights: Float64Array.from(kept, (i) => uncertainties ? 1 / uncertainties[i] : 1),
    endValue: knownEndValue(options.endValue, signal.unit, isConcentration, run.id),
    initialConcentration: isConcentration ? undefined : initialConcentration(run, options.reactant),
    reactant: isConcentration ? signal.name : reactantName(run, options.reactant),
    temperature: run.temperature,
    leftOut: signal.values.length - kept.length,
  };
}

function knownEndValue(
  given: EndValue | undefined,
  unit: string,
  isConcentration: boolean,
  run: string,
): number | undefined {
  if (given === "free") return undefined;
  if (given === undefined) return isConcentration ? 0 : undefined;
  return readQuantity(given, unit, `the end value of run "${run}"`);
}

function initialConcentration(run: Run, reactant: string | undefined): number | undefined {
  return run.initialConcentrations[reactantName(run, reactant)];
}

/** The reactant behind a raw signal: as given, else the only one whose concentration is known, else A. */
function reactantName(run: Run, given: string | undefined): string {
  if (given !== undefined) return given;
  const names = Object.keys(run.initialConcentrations);
  return names.length === 1 ? names[0] : "A";
}
