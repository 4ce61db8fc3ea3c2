/** A number in text with a given count of significant digits, as `0.00123`, `12.3`, `1.23×10⁻⁷`.
 *
 * Powers of ten are used below 10⁻³ and from 10⁶ on. Numbers that are not finite are named in words.
 *
 * @param value the number
 * @param digits significant digits, 1 to 17 */
export function formatNumber(value: number, digits = 4): string {
  if (!Number.isFinite(value)) return formatNonFinite(value);
  if (value === 0) return "0";
  const rounded = Number(value.toPrecision(digits));
  const exponent = decimalExponent(rounded);
  if (exponent < -3 || exponent >= 6) {
    const mantissa = rounded / 10 ** exponent;
    return `${minus(mantissa.toFixed(Math.max(digits - 1, 0)))}×10${superscript(exponent)}`;
  }
  return minus(rounded.toFixed(Math.max(digits - 1 - exponent, 0)));
}

/** Value and standard uncertainty in text by the rule of the GUM (JCGM 100:2008, 7.2.6): two
 * significant digits of uncertainty, the value rounded to the same place.
 *
 * Returns `83.14 ± 0.62`, or `(4.837 ± 0.032)×10⁻³` with one power of ten for both.
 *
 * @param value the value
 * @param uncertainty its standard uncertainty, same unit; > 0 and finite */
export function formatWithUncertainty(value: number, uncertainty: number): string {
  const u = Number(uncertainty.toPrecision(2));
  const last = decimalExponent(u) - 1;
  const lead = value === 0 ? last + 1 : Math.max(decimalExponent(value), decimalExponent(u));
  if (lead < -3 || lead >= 6 || last > 0) {
    const scale = 10 ** -lead;
    const places = Math.min(Math.max(lead - last, 0), 20);
    const text = `${fixed(value * scale, places)} ± ${fixed(u * scale, places)}`;
    return lead === 0 ? text : `(${text})×10${superscript(lead)}`;
  }
  const places = Math.min(Math.max(-last, 0), 20);
  return `${fixed(value, places)} ± ${fixed(u, places)}`;
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
