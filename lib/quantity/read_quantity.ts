import { describeDimension } from "./dimension.ts";
import { commensurable, convert, parseUnit, type Unit, UnitError } from "./unit.ts";

/** A physical quantity in an option: a bare number in the canonical unit, or text with its unit,
 * such as `"25 °C"`, `"3 mmol/L"`, `"90 min"`. */
export type Quantity = number | string;

const NUMBER_AND_UNIT = /^\s*([+\-−]?(?:\d+\.?\d*|\.\d+)(?:[eE][+\-−]?\d+)?)\s*(.*?)\s*$/;

/** Reads a physical quantity into one unit.
 *
 * @param input a bare number, taken to be in `unit`, or text with a unit
 * @param unit the unit of the answer
 * @param name what the quantity is, for the error message
 * @returns the value in `unit`
 * @throws {TypeError} if the input is neither a number nor text, or not finite
 * @throws {UnitError} if the text is no number with a unit, or its unit is not known or does not fit
 * @example
 * ```ts
 * import { strictEqual } from "node:assert";
 * import { readQuantity } from "ratebook";
 *
 * strictEqual(readQuantity("25 °C", "K", "temperature"), 298.15);
 * strictEqual(readQuantity("90 min", "s", "time"), 5400);
 * strictEqual(readQuantity(298.15, "K", "temperature"), 298.15);
 * ``` */
export function readQuantity(input: Quantity, unit: string, name: string): number {
  if (typeof input === "number") {
    if (Number.isFinite(input)) return input;
    throw new TypeError(
      `Cannot read ${name}: ${input} is not a finite number; write it in ${unit}`,
    );
  }
  if (typeof input !== "string") {
    throw new TypeError(
      `Cannot read ${name}: expected a number in ${unit} or text with its unit, got ${
        input === null ? "null" : typeof input
      }`,
    );
  }
  const match = NUMBER_AND_UNIT.exec(input);
  if (!match) {
    throw new UnitError(
      `Cannot read ${name} from "${input}": write a number and its unit, such as "1.5 ${unit}"`,
      input,
    );
  }
  const value = Number(match[1].replaceAll("−", "-"));
  const form = wrongForm(match[2]);
  if (form) throw new UnitError(`Cannot read ${name} from "${input}": ${form}`, input);
  if (!Number.isFinite(value)) {
    throw new TypeError(`Cannot read ${name}: "${match[1]}" is too large for a number`);
  }
  const to = parseUnit(unit);
  if (match[2] === "") {
    if (unit === "1") return value;
    throw new UnitError(
      `Cannot read ${name} from "${input}": the unit is missing; write "${match[1]} ${unit}"`,
      input,
    );
  }
  const from = readUnit(match[2], input, name);
  if (!commensurable(from, to)) {
    throw new UnitError(
      `Cannot read ${name} from "${input}": ${match[2]} measures ${
        describeDimension(from.dimension)
      }, expected ${describeDimension(to.dimension)} such as "1 ${unit}"`,
      input,
    );
  }
  return convert(value, from, to);
}

/** What is wrong with the way a number is written, by what follows its first figures. */
function wrongForm(rest: string): string | undefined {
  if (rest.startsWith(",")) return "write the decimal sign as a point";
  if (/^[·×*x]\s*10/.test(rest)) return "write a power of ten as 1.5e-3";
  if (/^(?!1(?![\d.]))[.'’]?\d/.test(rest)) {
    return "write the figures of the number together, as 12000";
  }
  return undefined;
}

function readUnit(text: string, input: string, name: string): Unit {
  try {
    return parseUnit(text);
  } catch (error) {
    if (!(error instanceof UnitError)) throw error;
    const why = error.message.slice(error.message.indexOf(`": `) + 3);
    throw new UnitError(`Cannot read ${name} from "${input}": ${why}`, input);
  }
}
