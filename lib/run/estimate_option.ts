import { Estimate } from "../quantity/estimate.ts";
import { type OptionReader, quantity } from "../quantity/options.ts";
import type { Quantity } from "../quantity/read_quantity.ts";

/** A quantity that is known exactly (a number or text with its unit) or with its standard error. */
export type UncertainQuantity = Estimate | Quantity;

/** Reads an option that may carry a standard error; a bare number or a text carries none.
 *
 * @param unit unit of the answer, and of a bare number
 * @param range what the value may be */
export function estimate(
  unit: string,
  range: { above?: number; atLeast?: number } = {},
): OptionReader<Estimate> {
  const plain = quantity(unit, range);
  return (value, name) => {
    if (!(value instanceof Estimate)) {
      return new Estimate({ value: plain(value, name), standardError: 0, unit });
    }
    const converted = value.in(unit);
    plain(converted.value, name);
    if (Number.isFinite(converted.standardError)) return converted;
    throw new RangeError(
      `Cannot use ${value} as ${name}: it has no standard error; write its value alone to take it ` +
        `as exact`,
    );
  };
}
