import { decimalExponent, superscript } from "../quantity/number_format.ts";
import { convert, parseUnit } from "../quantity/unit.ts";

/** A unit chosen for an axis, and how to get there from the canonical unit. */
export interface AxisUnit {
  /** Unit as written on the axis. */
  readonly unit: string;
  /** Canonical value to axis value. */
  readonly from: (value: number) => number;
}

const LADDERS: Readonly<Record<string, readonly string[]>> = {
  "s": ["ms", "s", "min", "h", "d"],
  "mol/L": ["nmol/L", "µmol/L", "mmol/L", "mol/L"],
  "Pa": ["Pa", "kPa", "MPa"],
};

/** On which rung a ladder's unit is taken: the largest in which the greatest value is at least this. */
const LEAST_GREATEST: Readonly<Record<string, number>> = { "s": 3, "mol/L": 0.5, "Pa": 0.5 };

/** The unit in which values up to `greatest` (canonical) read best. */
export function axisUnit(canonical: string, greatest: number): AxisUnit {
  const ladder = LADDERS[canonical];
  if (!ladder) return { unit: canonical, from: (value) => value };
  const least = LEAST_GREATEST[canonical];
  const fitting = ladder.filter((unit) => change(greatest, canonical, unit) >= least);
  const unit = fitting[fitting.length - 1] ?? ladder[0];
  return { unit, from: (value) => change(value, canonical, unit) };
}

/** Title of an axis: quantity and unit by quantity calculus (`time / min`), the bare name for a pure
 * number. */
export function axisTitle(quantity: string, unit: string): string {
  return unit === "1" ? quantity : `${quantity} / ${unit}`;
}

/** Tick label of a logarithmic axis: 10⁻³, and 2×10⁻³ between the powers. */
export function powerTick(value: number): string {
  const exponent = decimalExponent(value);
  const mantissa = Number((value / 10 ** exponent).toPrecision(3));
  if (exponent >= -1 && exponent <= 2) return String(Number(value.toPrecision(6)));
  return mantissa === 1 ? `10${superscript(exponent)}` : `${mantissa}×10${superscript(exponent)}`;
}

/** Ticks of a logarithmic axis between two values: powers of ten, with 2 and 5 between them where
 * there are few. */
export function powerTicks(low: number, high: number): number[] {
  const first = Math.floor(Math.log10(low));
  const last = Math.ceil(Math.log10(high));
  const steps = last - first > 4 ? [1] : last - first > 2 ? [1, 3] : [1, 2, 5];
  const ticks: number[] = [];
  for (let exponent = first; exponent <= last; exponent++) {
    for (const step of steps) ticks.push(Number(`${step}e${exponent}`));
  }
  const inside = ticks.filter((tick) => tick >= low * 0.999 && tick <= high * 1.001);
  return inside.length > 0 ? inside : [low, high];
}

/** Tick label of a linear axis with a true minus sign. */
export function linearTick(value: number): string {
  if (value === 0) return "0";
  if (Math.abs(value) >= 1e5 || Math.abs(value) < 1e-3) {
    const exponent = decimalExponent(value);
    return `${String(Number((value / 10 ** exponent).toPrecision(6)))}×10${superscript(exponent)}`
      .replace("-", "−");
  }
  return String(Number(value.toPrecision(12))).replace("-", "−");
}

function change(value: number, from: string, to: string): number {
  return convert(value, parseUnit(from), parseUnit(to));
}
