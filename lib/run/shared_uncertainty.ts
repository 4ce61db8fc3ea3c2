import type { Caution } from "../quantity/caution.ts";
import { formatNumber } from "../quantity/number_format.ts";
import type { Signal } from "./signal.ts";

/** The shared standard uncertainty of each value, all causes together: u² = Σ values². */
export function sharedStandardUncertainty(signal: Signal): Float64Array {
  const total = new Float64Array(signal.values.length);
  for (const { values } of signal.sharedUncertainties ?? []) {
    for (let i = 0; i < total.length; i++) total[i] = Math.hypot(total[i], values[i]);
  }
  return total;
}

/** The caution that a signal's values carry an error in common, or `undefined` where they do not. */
export function sharedCaution(run: string, signal: Signal): Caution | undefined {
  const causes = signal.sharedUncertainties ?? [];
  const total = sharedStandardUncertainty(signal);
  const largest = signal.values.reduce(
    (best, value, i) =>
      Math.abs(value) > Math.abs(signal.values[best]) || Number.isNaN(signal.values[best])
        ? i
        : best,
    0,
  );
  if (!(total[largest] > 0)) return undefined;
  const percent = 100 * total[largest] / Math.abs(signal.values[largest]);
  return {
    code: "shared-uncertainty",
    severity: "note",
    subject: run,
    message:
      `All values of "${signal.name}" in run "${run}" share an error (${
        causes.map((cause) => cause.from).join(", ")
      }), one standard uncertainty being ${
        formatNumber(percent, 2)
      } % of the largest value. It does ` +
      `not average out over readings and is not in their own uncertainties`,
  };
}
