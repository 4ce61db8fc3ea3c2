import { commensurable, convert, convertDifference, parseUnit } from "../quantity/unit.ts";

/** What a signal measures, as far as its unit and name tell. */
export type SignalQuantity = "concentration" | "pressure" | "absorbance" | "fraction" | "other";

/** A reading that is known only to lie below a limit. */
export interface CensoredReading {
  /** Which reading of the run. */
  readonly index: number;
  /** As it stood in the file: `<0.15`, `n.d.`. */
  readonly text: string;
  /** The limit, canonical unit, where one was written. */
  readonly limit?: number;
}

/** An error that all values of a signal have in common, such as that of the absorption coefficient they
 * were divided by: it moves them together and does not average out over the readings.
 *
 * The covariance of two values i and j from it is values[i]·values[j]. */
export interface SharedUncertainty {
  /** Where it comes from: `molar absorption coefficient`, `slope of the calibration`. */
  readonly from: string;
  /** What one standard deviation of the common cause does to each value, canonical unit, with its sign. */
  readonly values: Float64Array;
}

/** One measured signal of a run, one value a time. */
export interface Signal {
  /** Name of the species or signal. */
  readonly name: string;
  /** What it measures. */
  readonly quantity: SignalQuantity;
  /** Canonical unit of the values: mol/L, Pa, or 1. */
  readonly unit: string;
  /** Unit as the user wrote it. */
  readonly shownUnit: string;
  /** Values, canonical unit; `NaN` where there is no reading. Length of the run's times. */
  readonly values: Float64Array;
  /** Standard uncertainty of each value that is its own (not shared), canonical unit. */
  readonly standardUncertainties?: Float64Array;
  /** Uncertainties that the values share, each from its own independent cause. */
  readonly sharedUncertainties?: readonly SharedUncertainty[];
  /** Readings below a limit; their values are `NaN`. */
  readonly censored: readonly CensoredReading[];
}

/** A signal as a user writes it. */
export interface SignalInput {
  /** Name of the species or signal. */
  name: string;
  /** Unit of the values: `"mmol/L"`, `"AU"`, `"kPa"`, `"%"`. */
  unit: string;
  /** Values in that unit, one a time; `NaN` or `null` where there is no reading. */
  values: readonly (number | null)[] | Float64Array;
  /** Standard uncertainties in that unit. */
  standardUncertainties?: readonly number[] | Float64Array;
  /** Readings below a limit, limits in that unit. */
  censored?: readonly CensoredReading[];
}

const CANONICAL = ["mol/L", "Pa", "1"] as const;

/** The canonical unit in which a signal of this unit is kept; the unit itself where there is none. */
export function canonicalUnit(unit: string): string {
  const parsed = parseUnit(unit);
  return CANONICAL.find((canonical) => commensurable(parsed, parseUnit(canonical))) ?? unit;
}

/** Reads a signal, converting its unit once.
 *
 * @param input the signal @param count number of times of the run @param where for the message
 * @throws {RangeError} if the lengths do not match or an uncertainty is not positive */
export function readSignal(input: SignalInput, count: number, where: string): Signal {
  const { name, unit: shownUnit, values, standardUncertainties, censored = [] } = input;
  if (typeof name !== "string" || name.trim() === "") {
    throw new TypeError(`Cannot read a signal of ${where}: its name is missing`);
  }
  const what = `signal "${name}" of ${where}`;
  if (values.length !== count) {
    throw new RangeError(
      `Cannot read ${what}: it has ${values.length} values and the run has ${count} times`,
    );
  }
  const from = parseUnit(shownUnit);
  const unit = canonicalUnit(shownUnit);
  const to = parseUnit(unit);
  const converted = Float64Array.from(values, (value, i) => {
    if (value === null || Number.isNaN(value)) return NaN;
    if (typeof value === "number" && Number.isFinite(value)) return convert(value, from, to);
    throw new TypeError(
      `Cannot read ${what}: value ${i} is ${
        JSON.stringify(value)
      }; write a number, or NaN for none`,
    );
  });
  return {
    name,
    quantity: quantityOf(name, shownUnit, unit),
    unit,
    shownUnit,
    values: converted,
    standardUncertainties: standardUncertainties &&
      readUncertainties(
        standardUncertainties,
        converted,
        what,
        (u) => convertDifference(u, from, to),
      ),
    censored: censored.map((reading) => ({
      ...reading,
      limit: reading.limit === undefined ? undefined : convert(reading.limit, from, to),
    })),
  };
}

/** Gives a signal back that is already in canonical units.
 *
 * @throws {RangeError} if it has not one value a time */
export function sameLength(signal: Signal, count: number, where: string): Signal {
  if (signal.values.length === count) return signal;
  throw new RangeError(
    `Cannot make ${where}: signal "${signal.name}" has ${signal.values.length} values and the run ` +
      `has ${count} times; change both together`,
  );
}

function readUncertainties(
  given: readonly number[] | Float64Array,
  values: Float64Array,
  what: string,
  change: (u: number) => number,
): Float64Array {
  if (given.length !== values.length) {
    throw new RangeError(
      `Cannot read ${what}: it has ${given.length} uncertainties and ${values.length} values`,
    );
  }
  return Float64Array.from(given, (u, i) => {
    if (Number.isNaN(values[i])) return NaN;
    if (u > 0 && Number.isFinite(u)) return change(u);
    throw new RangeError(
      `Cannot read ${what}: the standard uncertainty of value ${i} is ${u}; it must be more than 0`,
    );
  });
}

function quantityOf(name: string, shownUnit: string, unit: string): SignalQuantity {
  if (unit === "mol/L") return "concentration";
  if (unit === "Pa") return "pressure";
  if (unit !== "1") return "other";
  if (["AU", "mAU", "a.u.", "absorbance"].includes(shownUnit)) return "absorbance";
  if (/absorbance|^A\d{3}$/i.test(name)) return "absorbance";
  return ["%", "ppm"].includes(shownUnit) ? "fraction" : "other";
}
