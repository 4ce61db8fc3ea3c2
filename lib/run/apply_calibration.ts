import type { Caution } from "../quantity/caution.ts";
import { Estimate } from "../quantity/estimate.ts";
import { formatNumber } from "../quantity/number_format.ts";
import * as option from "../quantity/options.ts";
import type { Quantity } from "../quantity/read_quantity.ts";
import { estimate, type UncertainQuantity } from "./estimate_option.ts";
import { convertLinearly, speciesBehind } from "./linear_conversion.ts";
import type { Run } from "./run.ts";

/** A calibration line S = intercept + slope·c. */
export interface CalibrationOptions {
  /** Slope, unit of the signal per mol/L (L/mol for a pure number), or text with its unit. */
  slope: UncertainQuantity;
  /** Intercept, canonical unit of the signal, or text with its unit.
   * @default {0} */
  intercept?: UncertainQuantity;
  /** Covariance of slope and intercept, product of their units above.
   * @default {0} */
  covariance?: number;
  /** Correlation of slope and intercept, −1 to 1; another way to say the covariance. */
  correlation?: number;
  /** Lowest and highest concentration of the standards, mol/L, or texts with their unit; readings outside
   * raise a caution. */
  range?: readonly [Quantity, Quantity];
  /** The species; the only one with a known initial concentration where left out. */
  species?: string;
  /** Name of the signal; needed where the run has several. */
  signal?: string;
}

/** Concentration from a signal by a linear calibration, c = (S − a)/b with intercept a and slope b.
 *
 * Each reading keeps its own standard uncertainty u(S)/|b|. The errors of a and b are the same for all
 * readings; they are kept apart, in `sharedUncertainties`, as two independent causes whose squares add up
 * to [u²(a) + c² u²(b) + 2 c cov(a, b)]/b².
 *
 * Source: JCGM 100:2008 (GUM), 5.2.2 and the calibration line of annex H.3.
 *
 * @param run a run with a signal that was calibrated
 * @param options slope and intercept with standard errors, their covariance
 * @returns a copy of the run with the concentration, mol/L, in place of the signal
 * @throws {TypeError} on a missing slope or an option of the wrong type
 * @throws {RangeError} on a slope of 0, a covariance larger than the standard errors allow, or a species
 * that cannot be told
 * @throws {UnitError} on a unit that does not fit
 * @example
 * ```ts
 * import { strictEqual } from "node:assert";
 * import { applyCalibration, Estimate, Run } from "ratebook";
 *
 * const run = new Run({
 *   id: "7",
 *   times: [0, 60],
 *   signals: [{ name: "peak area", unit: "1", values: [2100, 1100] }],
 * });
 * const converted = applyCalibration(run, {
 *   species: "ester",
 *   slope: new Estimate({ value: 2e5, standardError: 2e3, unit: "L/mol" }),
 *   intercept: 100,
 * });
 * strictEqual(converted.signal("ester").values[0], 0.01);
 * strictEqual(converted.cautions[0].code, "shared-uncertainty"); // 1 % in all values alike
 * ``` */
export function applyCalibration(run: Run, options: CalibrationOptions): Run {
  const signalName = typeof options?.signal === "string" ? options.signal : undefined;
  const signal = run.signal(signalName);
  const read = option.readOptions("applyCalibration", options, {
    slope: estimate(signal.unit === "1" ? "L/mol" : `(${signal.unit}) L mol-1`),
    intercept: estimate(signal.unit),
    covariance: option.number(),
    correlation: option.number({ min: -1, max: 1 }),
    range: option.list(option.quantity("mol/L")),
    species: option.text,
    signal: option.text,
  });
  const { slope, intercept = new Estimate({ value: 0, standardError: 0, unit: signal.unit }) } =
    read;
  if (!slope) {
    throw new TypeError(`Cannot apply a calibration without its slope: write { slope, intercept }`);
  }
  if (slope.value === 0) throw new RangeError(`Cannot apply a calibration of slope 0`);
  const correlation = correlationOf(slope, intercept, read.covariance, read.correlation);
  const species = speciesBehind(run, read.species, "applyCalibration");
  const [ua, ub, b] = [intercept.standardError, slope.standardError, slope.value];
  const values = signal.values.map((value) => (value - intercept.value) / b);
  // a = â + u(a) z₁ and b = b̂ + u(b) [r z₁ + √(1−r²) z₂], with z₁ and z₂ independent.
  return convertLinearly(run, signal, {
    species,
    zero: intercept.value,
    scale: 1 / b,
    shared: [
      {
        from: correlation === 0 ? "intercept of the calibration" : "calibration, intercept",
        effect: (c) => -(ua + c * ub * correlation) / b,
      },
      {
        from: correlation === 0
          ? "slope of the calibration"
          : "calibration, slope apart from the intercept",
        effect: (c) => -c * ub * Math.sqrt(1 - correlation ** 2) / b,
      },
    ],
    notes: read.range ? outside(run, species, values, read.range) : [],
  });
}

function correlationOf(
  slope: Estimate,
  intercept: Estimate,
  covariance: number | undefined,
  correlation: number | undefined,
): number {
  if (covariance !== undefined && correlation !== undefined) {
    throw new RangeError(
      `Cannot use both the covariance ${covariance} and the correlation ${correlation} of a ` +
        `calibration: give one`,
    );
  }
  const largest = slope.standardError * intercept.standardError;
  if (covariance === undefined) return largest === 0 ? 0 : correlation ?? 0;
  if (Math.abs(covariance) > largest * (1 + 1e-6)) {
    throw new RangeError(
      `Cannot use the covariance ${covariance} of a calibration: with standard errors of ` +
        `${slope.standardError} and ${intercept.standardError} it lies between ` +
        `${-largest} and ${largest}`,
    );
  }
  return largest === 0 ? 0 : Math.max(-1, Math.min(1, covariance / largest));
}

function outside(
  run: Run,
  species: string,
  values: Float64Array,
  range: readonly number[],
): Caution[] {
  const [low, high] = range;
  if (range.length !== 2 || !(low < high)) {
    throw new RangeError(
      `Cannot use [${range.join(", ")}] as the range of a calibration: write its lowest and ` +
        `highest concentration`,
    );
  }
  const count = values.filter((value) => value < low || value > high).length;
  return count === 0 ? [] : [{
    code: "calibration-range",
    severity: "caution",
    subject: run.id,
    message: `${count} of ${values.filter((value) => !Number.isNaN(value)).length} readings of ` +
      `"${species}" in run "${run.id}" lie outside the calibrated range, ${
        formatNumber(low, 4)
      } to ` +
      `${formatNumber(high, 4)} mol/L`,
  }];
}
