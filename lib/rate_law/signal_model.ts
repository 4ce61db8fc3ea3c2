import type { FollowedSignal } from "./followed_signal.ts";
import { remainingFraction } from "./integrated_law.ts";

/** Rate constant and order that hold in one run at one point of the parameter space. */
export interface LawAtRun {
  /** k, in (mol/L)^(1−n)/s, or 1/s where the concentration behind a signal is not known. */
  readonly rateConstant: number;
  /** n. */
  readonly order: number;
}

/** Reads the rate law of a run from the shared parameters, which come first in the vector. */
export type SharedLaw = (parameters: ArrayLike<number>, run: number) => LawAtRun;

/** Where a run's initial and end value stand in the parameter vector. */
export interface NuisancePlace {
  /** Index of the initial value S₀. */
  readonly initial: number;
  /** Index of the end value S∞, or `undefined` where it is known. */
  readonly end?: number;
}

/** Model of the signals of several runs, S = S∞ + (S₀ − S∞)·f(κt): shared parameters of the law
 * first, then each run's own initial value and (where free) end value. */
export class SignalModel {
  /** The signals. */
  readonly signals: readonly FollowedSignal[];
  /** Number of readings of all signals. */
  readonly count: number;
  /** Places of each run's own parameters. */
  readonly places: readonly NuisancePlace[];
  /** Length of the parameter vector. */
  readonly parameterCount: number;

  /** A model of these signals.
   *
   * @param signals the signals @param sharedCount number of parameters of the law */
  constructor(signals: readonly FollowedSignal[], sharedCount: number) {
    this.signals = signals;
    this.count = signals.reduce((sum, signal) => sum + signal.values.length, 0);
    let next = sharedCount;
    this.places = signals.map((signal) => ({
      initial: next++,
      end: signal.endValue === undefined ? next++ : undefined,
    }));
    this.parameterCount = next;
  }

  /** Names of the runs' own parameters, in their order. */
  get ownNames(): string[] {
    return this.signals.flatMap((signal) => [
      `initial value (${signal.run})`,
      ...(signal.endValue === undefined ? [`end value (${signal.run})`] : []),
    ]);
  }

  /** Initial and end value of a run. */
  ends(parameters: ArrayLike<number>, run: number): { initial: number; end: number } {
    const place = this.places[run];
    const end = place.end === undefined ? this.signals[run].endValue! : parameters[place.end];
    return { initial: parameters[place.initial], end };
  }

  /** κ = k[A]₀ⁿ⁻¹ of a run, 1/s. */
  kappa(law: LawAtRun, parameters: ArrayLike<number>, run: number): number {
    return law.rateConstant * this.reactantScale(parameters, run) ** (law.order - 1);
  }

  /** Initial concentration of the reactant, mol/L: known behind a raw signal, the signal's own
   * amplitude where it is a concentration, 1 where it is not known. */
  reactantScale(parameters: ArrayLike<number>, run: number): number {
    const signal = this.signals[run];
    if (!signal.isConcentration) return signal.initialConcentration ?? 1;
    const { initial, end } = this.ends(parameters, run);
    return Math.abs(initial - end);
  }

  /** Modelled signal of a run at a time. */
  value(law: LawAtRun, parameters: ArrayLike<number>, run: number, time: number): number {
    const { initial, end } = this.ends(parameters, run);
    const fraction = remainingFraction(law.order, this.kappa(law, parameters, run), time);
    return end + (initial - end) * fraction;
  }

  /** Weighted residuals, reading less model, of all runs. */
  residuals(shared: SharedLaw): (parameters: Float64Array, out: Float64Array) => void {
    return (parameters, out) => {
      let at = 0;
      this.signals.forEach((signal, run) => {
        const law = shared(parameters, run);
        const { initial, end } = this.ends(parameters, run);
        const kappa = this.kappa(law, parameters, run);
        for (let i = 0; i < signal.times.length; i++) {
          const fraction = remainingFraction(law.order, kappa, signal.times[i]);
          out[at++] = signal.rootWeights[i] *
            (signal.values[i] - end - (initial - end) * fraction);
        }
      });
    };
  }

  /** The part of a residual vector that belongs to each run. */
  split(residuals: Float64Array): Float64Array[] {
    let at = 0;
    return this.signals.map((signal) => {
      const part = residuals.slice(at, at + signal.values.length);
      at += signal.values.length;
      return part;
    });
  }
}
