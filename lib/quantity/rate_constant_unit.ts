import { superscript } from "./number_format.ts";

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
  const { concentration = "mol/L", time = "s" } = options;
  if (!Number.isFinite(order)) {
    throw new RangeError(
      `Cannot give the unit of a rate constant of order ${order}: write a number`,
    );
  }
  const exponent = 1 - order;
  const perTime = `${time}⁻¹`;
  if (exponent === 0) return perTime;
  if (concentration === "1") return perTime;
  const ratio = /^([^\s/^()]+?)\/([^\s/^()\d]+)(3?)$/.exec(concentration);
  if (!ratio || !Number.isInteger(exponent)) {
    const plain = /^[^\s/^()]+$/.test(concentration) ? concentration : `(${concentration})`;
    return exponent === 1 ? `${concentration} ${perTime}` : `${plain}^${trim(exponent)} ${perTime}`;
  }
  const [, amount, length, cubed] = ratio;
  const amounts = factor(amount, exponent);
  const volumes = factor(length, cubed ? -3 * exponent : -exponent);
  return exponent > 0 ? `${amounts} ${volumes} ${perTime}` : `${volumes} ${amounts} ${perTime}`;
}

function factor(symbol: string, exponent: number): string {
  return exponent === 1 ? symbol : `${symbol}${superscript(exponent)}`;
}

function trim(value: number): string {
  return String(Number(value.toFixed(4)));
}
