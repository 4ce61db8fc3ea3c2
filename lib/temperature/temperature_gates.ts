import type { Caution } from "../quantity/caution.ts";
import { formatNumber } from "../quantity/number_format.ts";

/** Fewest temperatures for an interval on an activation energy (common practice, no source). */
export const LEAST_TEMPERATURES = 3;

/** Least span of temperature for one, K (common practice, no source). */
export const LEAST_SPAN = 10;

/** Temperatures closer than this count as one, K. */
const SAME_TEMPERATURE = 0.5;

/** What stands against an activation energy from these temperatures.
 *
 * @param temperatures K */
export function temperatureCautions(temperatures: readonly number[]): Caution[] {
  const cautions: Caution[] = [];
  const distinct = distinctTemperatures(temperatures);
  if (distinct < LEAST_TEMPERATURES) {
    cautions.push({
      code: "too-few-temperatures",
      severity: "serious",
      message:
        `Only ${distinct} temperatures were measured; ${LEAST_TEMPERATURES} are the least for an activation ` +
        `energy whose scatter can be judged. Whether the Arrhenius line is straight cannot be told`,
    });
  }
  const span = Math.max(...temperatures) - Math.min(...temperatures);
  if (span < LEAST_SPAN) {
    cautions.push({
      code: "temperature-span",
      severity: "serious",
      message: `The temperatures span ${formatNumber(span, 3)} K, less than ${LEAST_SPAN} K: the ` +
        `activation energy depends on errors of a few tenths of a kelvin; widen the span`,
    });
  }
  return cautions;
}

/** What stands against a rate constant at a temperature that was not measured.
 *
 * @param temperature K @param range lowest and highest temperature measured, K */
export function extrapolationCautions(
  temperature: number,
  range: readonly [number, number],
): Caution[] {
  const below = range[0] - temperature;
  const above = temperature - range[1];
  const distance = Math.max(below, above);
  if (!(distance > 1e-6)) return [];
  const span = range[1] - range[0];
  const far = distance > span;
  return [{
    code: "extrapolation",
    severity: far ? "serious" : "caution",
    subject: `${formatNumber(temperature, 5)} K`,
    message:
      `${formatNumber(temperature, 5)} K lies ${formatNumber(distance, 3)} K ${
        below > 0 ? "below" : "above"
      } the tested range ${formatNumber(range[0], 5)} to ${formatNumber(range[1], 5)} K` +
      (far ? `, farther than the range is wide` : "") +
      `: the interval holds only if the same reaction in the same phase goes on by the same ` +
      `mechanism; measure nearer before deciding on storage, scale-up or process safety`,
  }];
}

/** Number of temperatures that are really different. */
export function distinctTemperatures(temperatures: readonly number[]): number {
  const sorted = temperatures.toSorted((a, b) => a - b);
  return sorted.filter((t, i) => i === 0 || t - sorted[i - 1] > SAME_TEMPERATURE).length;
}
