import {
  describeDimension,
  DIMENSIONLESS,
  multiplyDimensions,
  sameDimension,
} from "./dimension.ts";
import type { Dimension } from "./dimension.ts";
import { type UnitSymbol, unitSymbol, unitSymbolHint } from "./unit_symbols.ts";

/** A unit: how it is written, its size in SI base units, the zero of its scale, its dimension. */
export interface Unit {
  /** As written by the user. */
  readonly text: string;
  /** Size in coherent SI units (s, m, kg, K, mol). */
  readonly factor: number;
  /** Zero of the scale in SI units; other than 0 only for °C on its own. */
  readonly offset: number;
  /** Exponents of the base quantities. */
  readonly dimension: Dimension;
}

/** A unit that cannot be read, or that does not fit. */
export class UnitError extends RangeError {
  /** The unit, or the quantity with its unit, as it was written. */
  readonly text: string;

  /** An error with its message.
   *
   * @param message what is wrong and what to write @param text the offending text */
  constructor(message: string, text: string) {
    super(message);
    this.name = "UnitError";
    this.text = text;
  }
}

const SUPERSCRIPTS = "⁰¹²³⁴⁵⁶⁷⁸⁹⁻";
const TOKEN = /\s*(?:([·*.×])|(\/)|(\()|(\))|([^\s·*.×/()^\d⁰¹²³⁴⁵⁶⁷⁸⁹⁻−+-]+|1(?![\d.]))|(\S))/y;
const EXPONENT =
  /\^?(?:([+\-−]?\d+(?:\.\d+)?)|\(([+\-−]?\d+(?:\.\d+)?(?:\/\d+)?)\))|([⁻⁰¹²³⁴⁵⁶⁷⁸⁹]+(?:[.·][⁰¹²³⁴⁵⁶⁷⁸⁹]+)?)/y;
const cache = new Map<string, Unit>();

/** Reads a unit in the trade's spellings: `mmol/L`, `L mol-1 s-1`, `kJ/mol`, `cm^3/(molecule s)`,
 * `(mol/L)^-0.5/s`, `mol·m⁻³`, `°C`, `%`.
 *
 * More than one factor behind a solidus needs parentheses (`L/(mol s)`), as `L/mol s` can be read
 * in two ways (SI Brochure, 9th ed., 5.2).
 *
 * @throws {UnitError} if a symbol is not known or the expression is ambiguous */
export function parseUnit(text: string): Unit {
  const written = text.trim();
  const known = cache.get(written);
  if (known) return known;
  if (written === "") {
    throw new UnitError(`Cannot read a unit from an empty text: write "1" for a pure number`, text);
  }
  const unit = new UnitReader(written).read();
  cache.set(written, unit);
  return unit;
}

/** Whether two units measure the same dimension. */
export function commensurable(a: Unit, b: Unit): boolean {
  return sameDimension(a.dimension, b.dimension);
}

/** A value in one unit expressed in another.
 *
 * @throws {UnitError} if the units measure different dimensions */
export function convert(value: number, from: Unit, to: Unit): number {
  if (!commensurable(from, to)) throw mismatch(from, to, from.text);
  if (from.text === to.text) return value;
  return convertDifference(value, from, to) + (from.offset - to.offset) / to.factor;
}

/** A difference (or a standard uncertainty) in one unit expressed in another: scale zeros do not
 * count, so a difference of 5 °C is 5 K.
 *
 * @throws {UnitError} if the units measure different dimensions */
export function convertDifference(value: number, from: Unit, to: Unit): number {
  if (!commensurable(from, to)) throw mismatch(from, to, from.text);
  // One division by an integer-valued ratio keeps 3 mmol/L at exactly 0.003 mol/L.
  return from.factor >= to.factor
    ? value * (from.factor / to.factor)
    : value / (to.factor / from.factor);
}

function mismatch(from: Unit, to: Unit, text: string): UnitError {
  return new UnitError(
    `Cannot convert ${from.text} to ${to.text}: ${from.text} measures ` +
      `${describeDimension(from.dimension)}, ${to.text} measures ${
        describeDimension(to.dimension)
      }`,
    text,
  );
}

/** Recursive-descent reader of unit expressions. */
class UnitReader {
  #at = 0;
  constructor(readonly text: string) {}

  read(): Unit {
    const alone = unitSymbol(this.text);
    if (alone) return { text: this.text, ...alone };
    const { factor, dimension } = this.#product(false);
    return { text: this.text, factor, offset: 0, dimension };
  }

  #product(inside: boolean): UnitSymbol {
    let factor = 1;
    let dimension = DIMENSIONLESS;
    let divide = false;
    let divided = false;
    let pending = false;
    for (let first = true;; first = false) {
      const token = this.#next();
      if (token.kind === "end" || (token.kind === "close" && inside)) {
        if (token.kind === "end" && inside) this.#fail(`")" is missing`);
        if (first || pending) this.#fail("a unit is missing at the end");
        return { factor, offset: 0, dimension };
      }
      if (token.kind === "times" || token.kind === "over") {
        if (pending || (first && token.kind === "times")) {
          this.#fail(`"${token.text}" is not expected here`);
        }
        pending = true;
        divide = token.kind === "over";
        continue;
      }
      pending = false;
      if (divided && !divide && (token.kind === "symbol" || token.kind === "open")) {
        this.#fail(
          `what stands behind "/" can be read in two ways: write it like L/(mol s) or L mol-1 s-1`,
        );
      }
      const part = token.kind === "open" ? this.#product(true) : this.#symbol(token);
      const power = this.#exponent() * (divide ? -1 : 1);
      factor *= raise(part.factor, power);
      dimension = multiplyDimensions(dimension, part.dimension, power);
      divided ||= divide;
      divide = false;
    }
  }

  #symbol(token: Token): UnitSymbol {
    if (token.kind !== "symbol") return this.#fail(`"${token.text}" is not expected here`);
    const symbol = unitSymbol(token.text);
    if (!symbol) {
      return this.#fail(`the unit "${token.text}" is not known${unitSymbolHint(token.text)}`);
    }
    if (symbol.offset !== 0) {
      return this.#fail(`"${token.text}" has no zero inside a compound unit: write K`);
    }
    return symbol;
  }

  #next(): Token {
    if (this.text.slice(this.#at).trim() === "") return { kind: "end", text: "" };
    TOKEN.lastIndex = this.#at;
    const match = TOKEN.exec(this.text)!;
    this.#at = TOKEN.lastIndex;
    const kinds: Token["kind"][] = ["times", "over", "open", "close", "symbol", "other"];
    const index = match.slice(1).findIndex((group) => group !== undefined);
    return { kind: kinds[index], text: match[index + 1] };
  }

  #exponent(): number {
    EXPONENT.lastIndex = this.#at;
    const match = EXPONENT.exec(this.text);
    if (!match) return 1;
    this.#at = EXPONENT.lastIndex;
    const plain = (match[1] ?? match[2])?.replace("−", "-") ??
      [...match[3]].map((c) => c === "·" ? "." : "0123456789-"[SUPERSCRIPTS.indexOf(c)] ?? c)
        .join("");
    const [numerator, denominator] = plain.split("/");
    const exponent = Number(numerator) / Number(denominator ?? 1);
    if (!Number.isFinite(exponent)) this.#fail(`"${match[0]}" is no exponent`);
    return exponent;
  }

  #fail(why: string): never {
    throw new UnitError(`Cannot read the unit "${this.text}": ${why}`, this.text);
  }
}

/** A power of a unit's size; 1 dm³ is then 0.001 m³ to the last bit. */
function raise(factor: number, power: number): number {
  return factor < 1 ? (1 / factor) ** -power : factor ** power;
}

interface Token {
  readonly kind: "times" | "over" | "open" | "close" | "symbol" | "other" | "end";
  readonly text: string;
}
