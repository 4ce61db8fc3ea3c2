/** A number in text with a given count of significant digits, as `0.00123`, `12.3`, `1.23×10⁻⁷`.
 *
 * Powers of ten are used below 10⁻³ and from 10⁶ on. Numbers that are not finite are named in words.
 *
 * @param value the number
 * @param digits significant digits, 1 to 17 */
export function formatNumber(value: number, digits = 4): string {
  if (!Number.isFinite(value)) return formatNonFinite(value);
  if (value === 0) return "0";
  const [mantissa, power] = value.toExponential(digits - 1).split("e");
  const exponent = Number(power);
  if (exponent < -3 || exponent >= 6) return `${minus(mantissa)}×10${superscript(exponent)}`;
  return minus(Number(`${mantissa}e${power}`).toFixed(Math.max(digits - 1 - exponent, 0)));
}

/** Value and standard uncertainty in text by the rule of the GUM (JCGM 100:2008, 7.2.6): two
 * significant digits of uncertainty, the value rounded to the same place.
 *
 * Returns `83.14 ± 0.62`, or `(4.837 ± 0.032)×10⁻³` with one power of ten for both.
 *
 * @param value the value
 * @param uncertainty its standard uncertainty, same unit; > 0 and finite */
export function formatWithUncertainty(value: number, uncertainty: number): string {
  const last = decimalExponent(Number(uncertainty.toPrecision(2))) - 1;
  const exponent = Math.max(roundedExponent(value, last), last + 1);
  const scaled = exponent < -3 || exponent >= 6 || last > 0;
  const scale = scaled ? exponent : 0;
  const places = Math.min(Math.max(scale - last, 0), 100);
  const text = `${fixed(shift(value, -scale), places)} ± ${
    fixed(shift(uncertainty, -scale), places)
  }`;
  return scale === 0 ? text : `(${text})×10${superscript(scale)}`;
}

/** Exponent of the leading digit once a value is rounded at the place 10^last. */
function roundedExponent(value: number, last: number): number {
  if (value === 0) return last;
  const exponent = decimalExponent(value);
  const digits = exponent - last;
  return digits < 0 || digits > 100
    ? exponent
    : decimalExponent(Number(value.toExponential(digits)));
}

/** A number times 10^power, by its decimal figures: no overflow on the way. */
function shift(value: number, power: number): number {
  const [mantissa, exponent] = value.toExponential().split("e");
  return Number(`${mantissa}e${Number(exponent) + power}`);
}

/** Exponent of ten of the leading digit: 2 for 345, -3 for 0.0012. */
export function decimalExponent(value: number): number {
  const text = Math.abs(value).toExponential();
  return Number(text.slice(text.indexOf("e") + 1));
}

/** An integer or a decimal number in superscript figures: `⁻³`, `⁰·⁵`. */
export function superscript(value: number): string {
  return [...String(value)].map((c) => SUPERSCRIPT[c] ?? c).join("");
}

const SUPERSCRIPT: Readonly<Record<string, string>> = {
  "-": "⁻",
  ".": "·",
  "0": "⁰",
  "1": "¹",
  "2": "²",
  "3": "³",
  "4": "⁴",
  "5": "⁵",
  "6": "⁶",
  "7": "⁷",
  "8": "⁸",
  "9": "⁹",
};

/** The words for a number that is not finite. */
export function formatNonFinite(value: number): string {
  if (Number.isNaN(value)) return "not determined";
  return value > 0 ? "∞" : "−∞";
}

function fixed(value: number, places: number): string {
  const text = value.toFixed(places);
  return minus(Number(text) === 0 ? text.replace("-", "") : text);
}

function minus(text: string): string {
  return text.replace("-", "−");
}

/** A number with a fixed count of decimal places and a true minus sign. */
export function formatFixed(value: number, places: number): string {
  return Number.isFinite(value) ? fixed(value, places) : formatNonFinite(value);
}
