import type { FollowedSignal } from "./followed_signal.ts";
import { remainingFraction } from "./integrated_law.ts";

/** A rough fit of one run from which the least-squares search starts. */
export interface StartingValues {
  /** κ = k[A]₀ⁿ⁻¹, 1/s. */
  readonly kappa: number;
  /** Initial value of the signal. */
  readonly initial: number;
  /** End value of the signal. */
  readonly end: number;
  /** Weighted residual sum of squares. */
  readonly sumOfSquares: number;
}

/** Values of κ·(last time) that are tried: from 2 % conversion to a reaction over at the start. */
const TURNS = Array.from({ length: 49 }, (_, i) => 0.02 * 10 ** (i / 12));

/** Scans κ over four decades, solving for the initial and end value, which are linear, at each.
 *
 * Source: G. H. Golub & V. Pereyra, SIAM J. Numer. Anal. 10 (1973) 413 (variable projection). */
export function startingValues(signal: FollowedSignal, order: number): StartingValues {
  const last = signal.times[signal.times.length - 1];
  let best: StartingValues | undefined;
  for (const turns of TURNS) {
    const candidate = projected(signal, order, turns / last);
    if (!best || candidate.sumOfSquares < best.sumOfSquares) best = candidate;
  }
  return best!;
}

/** Best initial and end value at a given κ. */
function projected(signal: FollowedSignal, order: number, kappa: number): StartingValues {
  const { times, values, rootWeights, endValue } = signal;
  let ww = 0, wf = 0, wff = 0, wy = 0, wyf = 0;
  for (let i = 0; i < times.length; i++) {
    const w = rootWeights[i] ** 2;
    const f = remainingFraction(order, kappa, times[i]);
    const y = values[i] - (endValue ?? 0);
    ww += w;
    wf += w * f;
    wff += w * f * f;
    wy += w * y;
    wyf += w * y * f;
  }
  let amplitude = wyf / wff;
  let end = endValue ?? 0;
  if (endValue === undefined) {
    const determinant = ww * wff - wf * wf;
    if (determinant > 1e-12 * ww * wff) {
      amplitude = (ww * wyf - wf * wy) / determinant;
      end = (wy - amplitude * wf) / ww;
    }
  }
  let sumOfSquares = 0;
  for (let i = 0; i < times.length; i++) {
    const f = remainingFraction(order, kappa, times[i]);
    sumOfSquares += (rootWeights[i] * (values[i] - end - amplitude * f)) ** 2;
  }
  return { kappa, initial: end + amplitude, end, sumOfSquares };
}
