import { formatNumber, formatWithUncertainty } from "./number_format.ts";
import { studentFactor } from "./student_factor.ts";
import { convert, convertDifference, parseUnit } from "./unit.ts";

/** What an {@link Estimate} is made from. */
export interface EstimateInput {
  /** Best value, in `unit`. */
  readonly value: number;
  /** Standard uncertainty of the value, in `unit`; `NaN` where the data cannot give one. */
  readonly standardError: number;
  /** Unit, in any spelling that the unit reader knows; "1" for a pure number. */
  readonly unit: string;
  /** Degrees of freedom behind the standard error; infinite (a known error) if left out. */
  readonly degreesOfFreedom?: number;
  /** On which scale the error is symmetric. A quantity fitted as its logarithm, such as a
   * pre-exponential factor, is "logarithmic": its interval is then never negative.
   * @default {"linear"} */
  readonly symmetricOn?: "linear" | "logarithmic";
}

/** An estimate as plain data. */
export interface EstimateJson {
  /** Best value. */
  value: number | null;
  /** Standard uncertainty, `null` where there is none. */
  standardError: number | null;
  /** Unit of both. */
  unit: string;
  /** Degrees of freedom, `null` for a known error. */
  degreesOfFreedom: number | null;
  /** Lower and upper end of the 95 % interval. */
  interval95: [number | null, number | null];
}

/** A value with its standard uncertainty and unit.
 *
 * Prints by the rule of the GUM (JCGM 100:2008, 7.2.6): two digits of uncertainty, the value to
 * match.
 *
 * @example Shown in another unit
 * ```ts
 * import { strictEqual } from "node:assert";
 * import { Estimate } from "ratebook";
 *
 * const activationEnergy = new Estimate({ value: 83.14, standardError: 0.62, unit: "kJ/mol" });
 * strictEqual(`${activationEnergy}`, "83.14 ± 0.62 kJ/mol");
 * strictEqual(`${activationEnergy.in("kcal/mol")}`, "19.87 ± 0.15 kcal/mol");
 * ``` */
export class Estimate {
  /** Best value, in `unit`. */
  readonly value: number;
  /** Standard uncertainty, in `unit`; `NaN` where the data cannot give one. */
  readonly standardError: number;
  /** Unit of value and standard uncertainty. */
  readonly unit: string;
  /** Degrees of freedom behind the standard error; `undefined` for a known error. */
  readonly degreesOfFreedom?: number;
  /** On which scale the error is symmetric. */
  readonly symmetricOn: "linear" | "logarithmic";

  /** An estimate from its parts.
   *
   * @param input value, standard error and unit
   * @throws {RangeError} if the standard error is negative
   * @throws {UnitError} if the unit is not known */
  constructor(input: EstimateInput) {
    if (input.standardError < 0) {
      throw new RangeError(
        `Cannot make an estimate with the standard error ${input.standardError}: it must be 0 or more`,
      );
    }
    parseUnit(input.unit);
    this.value = input.value;
    this.standardError = input.standardError;
    this.unit = input.unit;
    if (input.degreesOfFreedom !== undefined && Number.isFinite(input.degreesOfFreedom)) {
      this.degreesOfFreedom = input.degreesOfFreedom;
    }
    this.symmetricOn = input.symmetricOn ?? "linear";
  }

  /** Standard error over the magnitude of the value. */
  get relativeStandardError(): number {
    return this.standardError / Math.abs(this.value);
  }

  /** Two-sided interval by Student's t (the normal distribution for a known error).
   *
   * @param level coverage, between 0 and 1
   * @returns lower and upper end, in `unit`
   * @throws {RangeError} if the level is not between 0 and 1 */
  interval(level = 0.95): [number, number] {
    if (!(level > 0 && level < 1)) {
      throw new RangeError(
        `Cannot give an interval of level ${level}: write a number between 0 and 1, such as 0.95`,
      );
    }
    const t = studentFactor(level, this.degreesOfFreedom ?? Infinity);
    if (this.symmetricOn === "linear") {
      const half = t * this.standardError;
      return [this.value - half, this.value + half];
    }
    const factor = Math.exp(t * this.relativeStandardError);
    const ends: [number, number] = [this.value / factor, this.value * factor];
    return this.value < 0 ? [ends[1], ends[0]] : ends;
  }

  /** The same estimate in another unit of the same dimension.
   *
   * @throws {UnitError} if the unit is not known or measures something else */
  in(unit: string): Estimate {
    const from = parseUnit(this.unit);
    const to = parseUnit(unit);
    return new Estimate({
      value: convert(this.value, from, to),
      standardError: convertDifference(this.standardError, from, to),
      unit,
      degreesOfFreedom: this.degreesOfFreedom,
      symmetricOn: this.symmetricOn,
    });
  }

  /** Value and standard uncertainty by the GUM rule, with the unit. */
  toString(): string {
    const unit = this.unit === "1" ? "" : ` ${this.unit}`;
    if (!Number.isFinite(this.value)) return `${formatNumber(this.value)}${unit}`;
    const known = Number.isFinite(this.standardError);
    if (!known) return `${formatNumber(this.value, 4)}${unit} (no standard error)`;
    if (this.standardError === 0) return `${formatNumber(this.value, 6)}${unit} (exact)`;
    return `${formatWithUncertainty(this.value, this.standardError)}${unit}`;
  }

  /** Plain data with units stated; what is not finite becomes `null`. */
  toJSON(): EstimateJson {
    const [low, high] = this.interval(0.95);
    return {
      value: finite(this.value),
      standardError: finite(this.standardError),
      unit: this.unit,
      degreesOfFreedom: this.degreesOfFreedom ?? null,
      interval95: [finite(low), finite(high)],
    };
  }

  /** What `console.log` prints. */
  [Symbol.for("Deno.customInspect")](): string {
    return this.toString();
  }

  /** What a notebook shows. */
  [Symbol.for("Jupyter.display")](): Record<string, string> {
    return { "text/plain": this.toString() };
  }
}

function finite(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}
