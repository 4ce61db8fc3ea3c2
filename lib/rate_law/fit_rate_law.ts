import type { Caution } from "../quantity/caution.ts";
import { Estimate } from "../quantity/estimate.ts";
import * as option from "../quantity/options.ts";
import type { Quantity } from "../quantity/read_quantity.ts";
import { rateConstantUnit } from "../quantity/rate_constant_unit.ts";
import { Run } from "../run/run.ts";
import { RunSet } from "../run/run_set.ts";
import { correctedAkaike } from "../statistics/information_criterion.ts";
import { fitLeastSquares, type FitOutcome } from "../statistics/least_squares_fit.ts";
import { propagate } from "../statistics/propagate.ts";
import { checkResiduals } from "../statistics/residual_check.ts";
import { type EndValue, type FollowedSignal, followSignal } from "./followed_signal.ts";
import { halfLivesFollowed, remainingFraction, timeToFraction } from "./integrated_law.ts";
import { rateEquation } from "./rate_equation.ts";
import { RateLawFit, type RunFit } from "./rate_law_fit.ts";
import { type SharedLaw, SignalModel } from "./signal_model.ts";
import { startingValues } from "./starting_values.ts";

/** One run, several, or a set of them. */
export type Runs = Run | RunSet | readonly Run[];

/** How {@link fitRateLaw} fits. */
export interface FitRateLawOptions {
  /** Order n of the rate law, or "free" to fit it.
   * @default {1} */
  order?: number | "free";
  /** Name of the species or signal that is followed; needed where a run has several. */
  species?: string;
  /** End value of the signal: "free" to fit it for each run, or its value. Free for a raw signal and
   * 0 for a concentration where left out. */
  endValue?: EndValue;
  /** Reactant whose initial concentration stands behind a raw signal; needed for orders other than 1
   * where a run names several. */
  reactant?: string;
  /** Most iterations.
   * @default {1000} */
  maxIterations?: number;
  /** Aborts the search; the best point so far is returned, marked as not converged. */
  signal?: AbortSignal;
}

/** Temperatures of runs that share a rate constant may differ by this much, K. */
const TEMPERATURE_TOLERANCE = 0.5;

const READERS = {
  order: option.either<number, "free">(option.number({ min: -5, max: 10 }), option.oneOf("free")),
  species: option.text,
  endValue: (value: unknown): EndValue => value as Quantity,
  reactant: option.text,
  maxIterations: option.integer(1),
  signal: option.instance(AbortSignal),
};

/** Fits an integrated rate law −d[A]/dt = k[A]ⁿ directly to the signals of one or more runs at one
 * temperature: k (and n, if free) are shared, initial and free end values are each run's own.
 *
 * A raw signal is S = S∞ + (S₀ − S∞)·f with f the fraction of reactant left, so that neither an
 * absorption coefficient nor the end value need be known. Readings weigh 1/u² where their standard
 * uncertainties are given, alike otherwise; the scale of the noise is taken from the residuals.
 *
 * Source: W. E. Wentworth, J. Chem. Educ. 42 (1965) 96 (direct nonlinear fit of rate laws).
 *
 * @param runs runs at one temperature
 * @param options order, signal, end value
 * @returns the fit; marked and without errors where it did not converge
 * @throws {TypeError} on an unknown option or one of the wrong type
 * @throws {RangeError} on no runs, too few readings, or temperatures that differ by more than 0.5 K
 * @example
 * ```ts
 * import { ok } from "node:assert";
 * import { fitRateLaw, Run } from "ratebook";
 *
 * const run = new Run({
 *   id: "1",
 *   times: { values: [0, 5, 10, 20, 40], unit: "min" },
 *   signals: [{ name: "ester", unit: "mmol/L", values: [10, 7.78, 6.07, 3.68, 1.35] }],
 * });
 * const fit = fitRateLaw(run, { order: 1 });
 * ok(Math.abs(fit.rateConstant.in("1/min").value - 0.05) < 1e-3);
 * ``` */
export function fitRateLaw(runs: Runs, options: FitRateLawOptions = {}): RateLawFit {
  const read = option.readOptions("fitRateLaw", options, READERS);
  const { order = 1 } = read;
  const all = listRuns(runs);
  sameTemperature(all);
  const signals = all.map((run) => followSignal(run, read));
  const cautions: Caution[] = [];
  const concentrationIsKnown = checkConcentrations(signals, order, cautions);
  const free = order === "free";
  const model = new SignalModel(signals, free ? 2 : 1);
  const starts = signals.map((signal) => startingValues(signal, free ? 1 : order));
  const scales = signals.map((signal, i) =>
    signal.isConcentration
      ? Math.abs(starts[i].initial - starts[i].end)
      : signal.initialConcentration ?? 1
  );
  const reference = geometricMean(scales);
  // The pseudo-first-order constant at the reference concentration hardly correlates with the order.
  const shared: SharedLaw = (p) => {
    const n = free ? p[1] : order;
    return { rateConstant: p[0] * reference ** (1 - n), order: n };
  };
  const outcome = fitLeastSquares({
    names: ["k at the reference concentration", ...(free ? ["order"] : []), ...model.ownNames],
    count: model.count,
    residuals: model.residuals(shared),
    start: [
      geometricMean(
        starts.map((s, i) => s.kappa * (scales[i] / reference) ** (free ? 0 : 1 - order)),
      ),
      ...(free ? [1] : []),
      ...starts.flatMap((s, i) =>
        model.places[i].end === undefined ? [s.initial] : [s.initial, s.end]
      ),
    ],
    maxIterations: read.maxIterations,
    signal: read.signal,
  });
  const n = free ? outcome.parameters[1] : order;
  const known = { degreesOfFreedom: outcome.degreesOfFreedom };
  const parts = model.split(outcome.residuals);
  const species = signals[0].name;
  return new RateLawFit({
    species,
    order: free
      ? propagate((p) => p[1], outcome.parameters, outcome.covariance, { unit: "1", ...known })
      : new Estimate({ value: order, standardError: 0, unit: "1" }),
    orderIsFitted: free,
    rateConstant: propagate(
      (p) => shared(p, 0).rateConstant,
      outcome.parameters,
      outcome.covariance,
      { unit: concentrationIsKnown ? rateConstantUnit(n) : "s⁻¹", ...known },
    ),
    equation: rateEquation(signals[0].reactant, free ? "n" : order),
    runs: signals.map((_, i) => runFit(model, shared, outcome, i, parts[i])),
    parameters: outcome.parameters,
    names: ["k at the reference concentration", ...(free ? ["order"] : []), ...model.ownNames],
    covariance: outcome.covariance,
    residualSumOfSquares: outcome.residualSumOfSquares,
    degreesOfFreedom: outcome.degreesOfFreedom,
    correctedAkaike: correctedAkaike(
      outcome.residualSumOfSquares,
      model.count,
      outcome.parameters.length,
    ),
    residualCheck: checkResiduals(parts),
    converged: outcome.converged,
    reason: outcome.reason,
    concentrationIsKnown,
    cautions: [
      ...outcome.cautions,
      ...cautions,
      ...leftOutCautions(signals),
      ...cautionsOfRuns(runs),
    ],
    sources: runs instanceof RunSet ? runs.sources : [],
  });
}

/** A run, a list or a set as a list.
 *
 * @throws {TypeError} if it is something else @throws {RangeError} if it is empty */
export function listRuns(runs: Runs): Run[] {
  const list = runs instanceof Run ? [runs] : [...runs];
  if (list.length === 0) {
    throw new RangeError(`Cannot fit a rate law to no runs: give at least one`);
  }
  for (const run of list) {
    if (!(run instanceof Run)) {
      throw new TypeError(
        `Cannot fit a rate law to ${String(run)}: expected runs, as readRuns gives`,
      );
    }
  }
  return list;
}

/** Cautions that runs bring along: how they were read, what was excluded from them. */
export function cautionsOfRuns(runs: Runs): readonly Caution[] {
  return runs instanceof RunSet ? runs.cautions : listRuns(runs).flatMap((run) => run.cautions);
}

/** What a fit of several runs says of one of them. */
export function runFit(
  model: SignalModel,
  shared: SharedLaw,
  outcome: FitOutcome,
  index: number,
  residuals: Float64Array,
): RunFit {
  const signal = model.signals[index];
  const place = model.places[index];
  const { parameters, covariance } = outcome;
  const known = { degreesOfFreedom: outcome.degreesOfFreedom };
  const law = shared(parameters, index);
  const last = signal.times[signal.times.length - 1];
  const kappa = model.kappa(law, parameters, index);
  return {
    run: signal.run,
    temperature: signal.temperature,
    initialValue: propagate((p) => p[place.initial], parameters, covariance, {
      unit: signal.unit,
      ...known,
    }),
    endValue: place.end === undefined
      ? new Estimate({ value: signal.endValue!, standardError: 0, unit: signal.unit })
      : propagate((p) => p[place.end!], parameters, covariance, { unit: signal.unit, ...known }),
    halfLife: propagate(
      (p) => {
        const here = shared(p, index);
        return timeToFraction(here.order, model.kappa(here, p, index), 0.5);
      },
      parameters,
      covariance,
      { unit: "s", ...known },
    ),
    halfLivesFollowed: halfLivesFollowed(remainingFraction(law.order, kappa, last)),
    signal,
    residuals: residuals.map((r, i) => r / signal.rootWeights[i]),
    at: (time) => model.value(law, parameters, index, time),
  };
}

/** Cautions on readings that did not go in. */
export function leftOutCautions(signals: readonly FollowedSignal[]): Caution[] {
  return signals.filter((signal) => signal.leftOut > 0).map((signal) => ({
    code: "readings-left-out",
    severity: "note",
    subject: signal.run,
    message:
      `${signal.leftOut} of ${
        signal.leftOut + signal.values.length
      } readings of run "${signal.run}" have ` +
      `no value (missing, below the limit of quantification, or excluded) and did not go into the fit`,
  }));
}

/** Mean of positive numbers on the logarithmic scale. */
export function geometricMean(values: readonly number[]): number {
  return Math.exp(values.reduce((sum, value) => sum + Math.log(value), 0) / values.length);
}

function sameTemperature(runs: readonly Run[]): void {
  const known = runs.filter((run) => run.temperature !== undefined);
  const temperatures = known.map((run) => run.temperature!);
  const span = Math.max(...temperatures) - Math.min(...temperatures);
  if (!(span > TEMPERATURE_TOLERANCE)) return;
  throw new RangeError(
    `Cannot share one rate constant between runs whose temperatures span ${span.toFixed(1)} K: ` +
      `fit each of runs.groupBy("temperature"), or all at once with fitArrhenius(runs)`,
  );
}

/** Whether k gets its full unit; runs of unknown concentration cannot share a k of other order. */
function checkConcentrations(
  signals: readonly FollowedSignal[],
  order: number | "free",
  cautions: Caution[],
): boolean {
  const unknown = signals.filter((s) => !s.isConcentration && s.initialConcentration === undefined);
  if (order === 1 || unknown.length === 0) return true;
  const ids = unknown.map((s) => `"${s.run}"`).join(", ");
  if (signals.length > 1) {
    throw new RangeError(
      `Cannot share a rate constant of order ${order} between runs: the initial concentration of ` +
        `the reactant is not known for ${ids}; give initial concentrations (and the option "reactant" ` +
        `where there are several), or fit the runs one by one`,
    );
  }
  cautions.push({
    code: "concentration-unknown",
    severity: "note",
    subject: unknown[0].run,
    message:
      `The initial concentration of the reactant is not known for run ${ids}: k is given as k[A]₀ⁿ⁻¹, ` +
      `in s⁻¹; divide it by [A]₀ⁿ⁻¹`,
  });
  return false;
}
