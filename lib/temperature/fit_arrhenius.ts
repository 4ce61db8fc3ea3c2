import type { Caution } from "../quantity/caution.ts";
import { GAS_CONSTANT } from "../quantity/constants.ts";
import { Estimate } from "../quantity/estimate.ts";
import * as option from "../quantity/options.ts";
import type { Quantity } from "../quantity/read_quantity.ts";
import { readQuantity } from "../quantity/read_quantity.ts";
import { convert, convertDifference, parseUnit } from "../quantity/unit.ts";
import type { EndValue } from "../rate_law/followed_signal.ts";
import type { Runs } from "../rate_law/fit_rate_law.ts";
import { Run } from "../run/run.ts";
import { RunSet } from "../run/run_set.ts";
import { ArrheniusFit, type RateConstantPoint } from "./arrhenius_fit.ts";
import { fitArrheniusToRuns } from "./fit_arrhenius_to_runs.ts";
import { fitLogLine } from "./log_line.ts";
import { temperatureCautions } from "./temperature_gates.ts";

/** A row of a table of rate constants. */
export interface RateConstantRow {
  /** Temperature, K, or text with its unit. */
  temperature: Quantity;
  /** Rate constant: a number in the option `unit`, text with its unit, or an estimate. */
  rateConstant: number | string | Estimate;
  /** Its standard uncertainty, in the unit of the rate constant. */
  standardError?: number;
}

/** How {@link fitArrhenius} fits. */
export interface FitArrheniusOptions {
  /** Unit of bare rate constants and of the result.
   * @default {"s⁻¹"} */
  unit?: string;
  /** For runs: order of the rate law.
   * @default {1} */
  order?: number;
  /** For runs: name of the species or signal that is followed. */
  species?: string;
  /** For runs: end value of the signal, as in {@link fitRateLaw}. */
  endValue?: EndValue;
  /** For runs: reactant behind a raw signal, as in {@link fitRateLaw}. */
  reactant?: string;
  /** For runs: most iterations.
   * @default {1000} */
  maxIterations?: number;
  /** For runs: aborts the search. */
  signal?: AbortSignal;
}

/** Fits the Arrhenius equation k = A·exp(−Ea/RT) to rate constants, or to runs in one step.
 *
 * A table is fitted as ln k against 1/T with weights (k/u)², which is the fit of k itself to first
 * order in u/k. Stated uncertainties are trusted unless the scatter exceeds them. Runs are fitted all
 * at once: one likelihood, Ea and k_ref shared, initial and free end values each run's own. Either
 * way the result is referred to the temperature at which ln k and Ea do not correlate, and carries the
 * full covariance.
 *
 * Source: IUPAC Gold Book, A00446 (Arrhenius equation); M. Schwaab & J. C. Pinto, Chem. Eng. Sci. 62
 * (2007) 2750 (reference temperature).
 *
 * @param data rows of temperature and rate constant, or runs at several temperatures
 * @param options unit; for runs the rate law
 * @returns the fit with its cautions (fewer than 3 temperatures, less than 10 K, scatter)
 * @throws {RangeError} on fewer than 2 temperatures, a rate constant that is not positive, or
 * standard errors given for some rows only
 * @throws {TypeError} on a row or option of the wrong type
 * @example
 * ```ts
 * import { strictEqual } from "node:assert";
 * import { fitArrhenius } from "ratebook";
 *
 * const fit = fitArrhenius([
 *   { temperature: "25 °C", rateConstant: 1.02e-4, standardError: 2e-6 },
 *   { temperature: "35 °C", rateConstant: 3.01e-4, standardError: 6e-6 },
 *   { temperature: "45 °C", rateConstant: 8.11e-4, standardError: 1.6e-5 },
 *   { temperature: "55 °C", rateConstant: 2.10e-3, standardError: 4e-5 },
 * ]);
 * strictEqual(fit.activationEnergy.toString(), "81.90 ± 0.71 kJ/mol");
 * ``` */
export function fitArrhenius(
  data: readonly RateConstantRow[] | Runs,
  options: FitArrheniusOptions = {},
): ArrheniusFit {
  const read = option.readOptions("fitArrhenius", options, {
    unit: option.text,
    order: option.number({ min: -5, max: 10 }),
    species: option.text,
    endValue: (value: unknown): EndValue => value as Quantity,
    reactant: option.text,
    maxIterations: option.integer(1),
    signal: option.instance(AbortSignal),
  });
  if (isRuns(data)) return fitArrheniusToRuns(data, read);
  const points = readPoints(data, read.unit);
  const stated = points.filter((p) => Number.isFinite(p.rateConstant.standardError)).length;
  if (stated !== 0 && stated !== points.length) {
    throw new RangeError(
      `Cannot weigh rate constants: ${stated} of ${points.length} have a standard error; give it for ` +
        `all of them or for none`,
    );
  }
  const temperatures = points.map((p) => p.temperature);
  if (new Set(temperatures).size < 2) {
    throw new RangeError(
      `Cannot fit an activation energy to ${
        new Set(temperatures).size
      } temperature: give at least 3`,
    );
  }
  const line = fitLogLine(
    temperatures.map((t) => 1 / t),
    points.map((p) => Math.log(p.rateConstant.value)),
    stated > 0 ? points.map((p) => p.rateConstant.relativeStandardError) : undefined,
  );
  const cautions: Caution[] = temperatureCautions(temperatures);
  if (line.birgeRatio > 1) {
    cautions.push({
      code: "scatter-exceeds-uncertainty",
      severity: "caution",
      message: `The rate constants scatter about the line more than their standard errors allow ` +
        `(χ² = ${
          line.chiSquare!.toPrecision(3)
        } with ${line.degreesOfFreedom} degrees of freedom, ` +
        `p = ${
          line.chiSquareProbability!.toPrecision(2)
        }): the errors were widened by the factor ` +
        `${line.birgeRatio.toPrecision(2)}; look for errors of temperature or a bent line`,
    });
  }
  return new ArrheniusFit({
    points,
    referenceTemperature: 1 / line.reference,
    logReference: line.height,
    logReferenceVariance: line.heightVariance,
    activationEnergy: GAS_CONSTANT * line.steepness,
    activationEnergyVariance: GAS_CONSTANT ** 2 * line.steepnessVariance,
    pointVariance: line.pointVariance,
    degreesOfFreedom: line.degreesOfFreedom,
    unit: points[0].rateConstant.unit,
    residuals: line.residuals,
    chiSquare: line.chiSquare,
    chiSquareProbability: line.chiSquareProbability,
    origin: "rate constants",
    cautions,
  });
}

function isRuns(data: readonly RateConstantRow[] | Runs): data is Runs {
  if (data instanceof Run || data instanceof RunSet) return true;
  if (!Array.isArray(data)) {
    throw new TypeError(
      `Cannot fit the Arrhenius equation to ${
        String(data)
      }: give rows { temperature, rateConstant, ` +
        `standardError } or runs`,
    );
  }
  return data.length > 0 && data.every((item) => item instanceof Run);
}

function readPoints(
  rows: readonly RateConstantRow[],
  unitOption: string | undefined,
): RateConstantPoint[] {
  const first = rows[0]?.rateConstant;
  const unit = unitOption ?? (first instanceof Estimate ? first.unit : "s⁻¹");
  const to = parseUnit(unit);
  return rows.map((row, i) => {
    const where = `row ${i} of the rate constants`;
    if (typeof row !== "object" || row === null || !("rateConstant" in row)) {
      throw new TypeError(
        `Cannot read ${where}: expected { temperature, rateConstant, standardError }, got ${
          JSON.stringify(row)
        }`,
      );
    }
    const temperature = readQuantity(row.temperature, "K", `the temperature of ${where}`);
    const given = row.rateConstant;
    const estimate = given instanceof Estimate;
    const from = estimate ? parseUnit(given.unit) : to;
    const value = estimate
      ? convert(given.value, from, to)
      : readQuantity(given, unit, `the rate constant of ${where}`);
    const error = row.standardError ?? (estimate ? given.standardError : NaN);
    if (!(temperature > 0) || !(value > 0)) {
      throw new RangeError(
        `Cannot take the logarithm for ${where}: temperature ${temperature} K and rate constant ` +
          `${value} ${unit} must both be more than 0`,
      );
    }
    if (error <= 0) {
      throw new RangeError(
        `Cannot weigh ${where}: its standard error is ${error}; leave it out or give one above 0`,
      );
    }
    return {
      temperature,
      rateConstant: new Estimate({
        value,
        standardError: convertDifference(error, from, to),
        unit,
        degreesOfFreedom: estimate ? given.degreesOfFreedom : undefined,
      }),
    };
  });
}
