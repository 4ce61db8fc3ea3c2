import { superscript } from "./number_format.ts";
import { readOptions, text } from "./options.ts";
import { convert, parseUnit } from "./unit.ts";

/** Units in which a rate constant is shown. */
export interface RateConstantUnitOptions {
  /** Unit of concentration (or of the signal that stands for it).
   * @default {"mol/L"} */
  concentration?: string;
  /** Unit of time.
   * @default {"s"} */
  time?: string;
}

/** Unit of the rate constant of an n-th order rate law, (concentration)^(1−n) per time.
 *
 * Gives `mol L⁻¹ s⁻¹`, `s⁻¹`, `L mol⁻¹ s⁻¹` for orders 0, 1, 2, and `(mol/L)^-0.5 s⁻¹` for 1.5.
 *
 * @param order overall order n
 * @param options units of concentration and time
 * @throws {RangeError} if the order is not a finite number
 * @throws {TypeError} on an option that does not exist or is no text
 * @throws {UnitError} if a unit is not known, or the unit of time measures something else
 * @example
 * ```ts
 * import { strictEqual } from "node:assert";
 * import { rateConstantUnit } from "ratebook";
 *
 * strictEqual(rateConstantUnit(2), "L mol⁻¹ s⁻¹");
 * strictEqual(rateConstantUnit(2, { concentration: "molecule/cm3" }), "cm³ molecule⁻¹ s⁻¹");
 * strictEqual(rateConstantUnit(1, { time: "min" }), "min⁻¹");
 * ``` */
export function rateConstantUnit(order: number, options: RateConstantUnitOptions = {}): string {
  const { concentration = "mol/L", time = "s" } = readOptions("rateConstantUnit", options, {
    concentration: text,
    time: text,
  });
  if (!Number.isFinite(order)) {
    throw new RangeError(
      `Cannot give the unit of a rate constant of order ${order}: write a number`,
    );
  }
  convert(1, parseUnit(time), parseUnit("s"));
  parseUnit(concentration);
  const exponent = 1 - order;
  const perTime = `${time}⁻¹`;
  if (exponent === 0 || concentration === "1") return perTime;
  const ratio = /^([^\s/^()]+?)\/([^\s/^()\d³]+)(\^?3|³)?$/.exec(concentration);
  if (!ratio || !Number.isInteger(exponent)) {
    if (exponent === 1 && !concentration.includes("/")) return `${concentration} ${perTime}`;
    const plain = /^[^\s/^()⁻\d]+$/.test(concentration) ? concentration : `(${concentration})`;
    return `${power(plain, exponent)} ${perTime}`;
  }
  const [, amount, length, cubed] = ratio;
  const amounts = power(amount, exponent);
  const volumes = power(length, cubed ? -3 * exponent : -exponent);
  return exponent > 0 ? `${amounts} ${volumes} ${perTime}` : `${volumes} ${amounts} ${perTime}`;
}

function power(symbol: string, exponent: number): string {
  if (exponent === 1) return symbol;
  if (Number.isInteger(exponent)) return `${symbol}${superscript(exponent)}`;
  return `${symbol}^${decimal(exponent) ?? fraction(exponent) ?? Number(exponent.toFixed(6))}`;
}

function decimal(value: number): number | undefined {
  const short = Number(value.toFixed(4));
  return Math.abs(short - value) < 1e-12 ? short : undefined;
}

/** A simple fraction such as `(2/3)`: rounded to decimals, the exponent would change the unit. */
function fraction(value: number): string | undefined {
  const denominator = [3, 6, 7, 9, 11, 12].find((d) =>
    Math.abs(Math.round(value * d) - value * d) < 1e-12
  );
  return denominator === undefined
    ? undefined
    : `(${Math.round(value * denominator)}/${denominator})`;
}
