import { closest, distance } from "fastest-levenshtein";
import { type Quantity, readQuantity } from "./read_quantity.ts";

/** Reads one option: checks its type and range and gives it in canonical units. */
export type OptionReader<T> = (value: unknown, name: string) => T;

/** The readers of all options of a function, by name. */
export type OptionReaders = Readonly<Record<string, OptionReader<unknown>>>;

/** What {@link readOptions} gives back: each option read, or undefined where it was not given. */
export type ReadOptions<R extends OptionReaders> = { [K in keyof R]?: ReturnType<R[K]> };

/** Checks the options of a public function at run time (notebook cells are not type-checked).
 *
 * @param owner the function's name, for the message
 * @param given what the caller wrote
 * @param readers the reader of each option
 * @throws {TypeError} on an option that does not exist (with the nearest name that does) or of the wrong type
 * @throws {RangeError} on a value out of range */
export function readOptions<R extends OptionReaders>(
  owner: string,
  given: unknown,
  readers: R,
): ReadOptions<R> {
  if (given === undefined) return {};
  if (typeof given !== "object" || given === null || Symbol.iterator in given) {
    throw new TypeError(
      `Cannot read the options of ${owner}: expected an object, got ${show(given)}`,
    );
  }
  const names = Object.keys(readers);
  const read: Record<string, unknown> = {};
  for (const [name, value] of Object.entries(given)) {
    if (!Object.hasOwn(readers, name)) throw unknownOption(owner, name, names);
    if (value !== undefined) read[name] = readers[name](value, `option "${name}" of ${owner}`);
  }
  return read as ReadOptions<R>;
}

function unknownOption(owner: string, name: string, names: readonly string[]): TypeError {
  const near = names.length > 0 ? closest(name, names) : "";
  const meant = near && distance(name, near) <= Math.max(2, near.length / 2)
    ? `; did you mean "${near}"?`
    : "";
  return new TypeError(
    `Cannot use the option "${name}" of ${owner}: it does not exist${meant} (there are: ${
      names.join(", ") || "none"
    })`,
  );
}

/** A physical quantity: a bare number in `unit`, or text with its unit. */
export function quantity(
  unit: string,
  range: { above?: number; atLeast?: number } = {},
): OptionReader<number> {
  return (value, name) => {
    const number = readQuantity(value as Quantity, unit, name);
    if (range.above !== undefined && !(number > range.above)) {
      throw outOfRange(name, value, `more than ${range.above} ${unit}`);
    }
    if (range.atLeast !== undefined && !(number >= range.atLeast)) {
      throw outOfRange(name, value, `${range.atLeast} ${unit} or more`);
    }
    return number;
  };
}

/** A finite number, with a least and a greatest value where given. */
export function number(range: { min?: number; max?: number } = {}): OptionReader<number> {
  const { min = -Infinity, max = Infinity } = range;
  return (value, name) => {
    if (typeof value !== "number" || !Number.isFinite(value)) {
      throw wrongType(name, value, "a finite number");
    }
    if (value < min || value > max) {
      throw outOfRange(name, value, describeRange(min, max));
    }
    return value;
  };
}

function describeRange(min: number, max: number): string {
  if (max === Infinity) return `${min} or more`;
  return min === -Infinity ? `${max} or less` : `between ${min} and ${max}`;
}

/** A whole number, at least `min`. */
export function integer(min = 0): OptionReader<number> {
  return (value, name) => {
    if (!Number.isInteger(value)) throw wrongType(name, value, "a whole number");
    if (value as number < min) throw outOfRange(name, value, `${min} or more`);
    return value as number;
  };
}

/** One of a few words or numbers. */
export function oneOf<T extends string | number | boolean>(
  ...choices: readonly T[]
): OptionReader<T> {
  return (value, name) => {
    if (choices.includes(value as T)) return value as T;
    throw outOfRange(name, value, `one of ${choices.map(show).join(", ")}`);
  };
}

/** Either of two kinds of value: the second reader is tried where the first refuses. */
export function either<A, B>(first: OptionReader<A>, second: OptionReader<B>): OptionReader<A | B> {
  return (value, name) => {
    try {
      return first(value, name);
    } catch (refusal) {
      try {
        return second(value, name);
      } catch {
        throw refusal;
      }
    }
  };
}

/** A text. */
export function text(value: unknown, name: string): string {
  if (typeof value !== "string") throw wrongType(name, value, "text");
  return value;
}

/** true or false. */
export function flag(value: unknown, name: string): boolean {
  if (typeof value !== "boolean") throw wrongType(name, value, "true or false");
  return value;
}

/** A list, each element read by the same reader. */
export function list<T>(element: OptionReader<T>): OptionReader<T[]> {
  return (value, name) => {
    if (!Array.isArray(value) && !ArrayBuffer.isView(value)) throw wrongType(name, value, "a list");
    return Array.from(
      value as ArrayLike<unknown>,
      (item, i) => element(item, `${name}, item ${i}`),
    );
  };
}

/** An object from names to values, each read by the same reader. */
export function record<T>(element: OptionReader<T>): OptionReader<Record<string, T>> {
  return (value, name) => {
    if (typeof value !== "object" || value === null || Symbol.iterator in value) {
      throw wrongType(name, value, "an object from names to values");
    }
    return Object.fromEntries(
      Object.entries(value).map(([key, item]) => [key, element(item, `${name}, "${key}"`)]),
    );
  };
}

/** A function. */
export function callable<F>(value: unknown, name: string): F {
  if (typeof value !== "function") throw wrongType(name, value, "a function");
  return value as F;
}

/** An object of a class. */
export function instance<T>(kind: new (...args: never[]) => T): OptionReader<T> {
  return (value, name) => {
    if (!(value instanceof kind)) throw wrongType(name, value, `an object of ${kind.name}`);
    return value;
  };
}

function wrongType(name: string, value: unknown, expected: string): TypeError {
  return new TypeError(`Cannot use ${show(value)} as ${name}: expected ${expected}`);
}

function outOfRange(name: string, value: unknown, expected: string): RangeError {
  return new RangeError(`Cannot use ${show(value)} as ${name}: expected ${expected}`);
}

function show(value: unknown): string {
  if (typeof value === "string") return `"${value}"`;
  if (typeof value === "function") return "a function";
  if (Array.isArray(value)) return `a list of ${value.length}`;
  if (typeof value === "object" && value !== null) {
    if (Symbol.iterator in value) return `a ${value.constructor.name}`;
    return `an object (${Object.keys(value).join(", ")})`;
  }
  return String(value);
}
