import { type FilePlace, RunFileError } from "./run_file_error.ts";

/** Decimal mark of a file. */
export type DecimalMark = "." | ",";

/** What a cell of a number column holds. */
export type NumberCell =
  | { readonly kind: "number"; readonly value: number }
  | { readonly kind: "censored"; readonly text: string; readonly limit?: number }
  | { readonly kind: "empty" };

const POINT = /^[+\-−]?(\d+\.?\d*|\.\d+)([eE][+\-−]?\d+)?$/;
const COMMA = /^[+\-−]?(\d+,?\d*|,\d+)([eE][+\-−]?\d+)?$/;
/** One mark, three digits behind it, no leading zero: 1,234 may be 1.234 or 1234. */
const COULD_BE_THOUSANDS = /^[+\-−]?[1-9]\d{0,2}[.,]\d{3}$/;
const GROUPED = /^[+\-−]?\d{1,3}([.,]\d{3})*[.,]\d+$/;
const CENSORED = /^(?:n\.?\s?d\.?|b[dq]l|b?lo[dq]|below\s+lo[dq]|not\s+detected)$/i;
const BELOW = /^<\s*(.*)$/;
const LIMIT_WORD = /^(?:|lo[dq]|[dq]l|mdl|limit)$/i;

/** A cell with its place. */
export interface PlacedCell {
  readonly text: string;
  readonly place: FilePlace;
}

/** Decides the decimal mark of a file from all its number cells together.
 *
 * A comma with other than three digits behind it, or after a leading zero, can only be decimal; so can a
 * point. Where the file holds both, or only commas that may be thousands marks, nothing is guessed.
 *
 * @param cells cells of number columns
 * @param given the mark the caller stated, if any
 * @throws {RunFileError} where the mark cannot be told */
export function decimalMark(cells: readonly PlacedCell[], given?: DecimalMark): DecimalMark {
  if (given) return given;
  const plain = cells.map((cell) => ({ ...cell, text: cell.text.replace(/^<\s*/, "") }));
  const commas = plain.filter((cell) => COMMA.test(cell.text) && cell.text.includes(","));
  const points = plain.filter((cell) => POINT.test(cell.text) && cell.text.includes("."));
  const sureComma = commas.find((cell) => !COULD_BE_THOUSANDS.test(cell.text));
  const surePoint = points.find((cell) => !COULD_BE_THOUSANDS.test(cell.text));
  if (commas.length === 0) return ".";
  if (points.length > 0) {
    const odd = sureComma && !surePoint ? points[0] : commas[0];
    const other = odd === points[0] ? commas[0] : points[0];
    throw new RunFileError([{
      ...odd.place,
      message:
        `the file writes both ${odd.text} and ${other.text} (line ${other.place.line}); write ` +
        `one decimal mark throughout, and no thousands marks`,
    }]);
  }
  if (sureComma) return ",";
  throw new RunFileError([{
    ...commas[0].place,
    message:
      `the comma may be a decimal or a thousands mark, and nothing else in the file tells; ` +
      `write ${commas[0].text.replace(",", ".")} or ${
        commas[0].text.replace(",", "")
      }, or say which ` +
      `with the option decimal: "," or "."`,
  }]);
}

/** Reads a cell of a number column.
 *
 * @param cell the cell @param mark decimal mark of the file
 * @returns the number, or that it lies below a limit, or that it is empty
 * @throws {RunFileError} on text that is neither */
export function readNumberCell(cell: PlacedCell, mark: DecimalMark): NumberCell {
  const { text, place } = cell;
  if (text === "") return { kind: "empty" };
  const value = readNumber(text, mark);
  if (value !== undefined) return { kind: "number", value };
  if (CENSORED.test(text)) return { kind: "censored", text };
  const below = BELOW.exec(text)?.[1];
  if (below !== undefined) {
    const limit = readNumber(below, mark);
    if (limit !== undefined) return { kind: "censored", text, limit };
    if (LIMIT_WORD.test(below)) return { kind: "censored", text };
  }
  throw new RunFileError([{ ...place, message: numberAdvice(text, mark) }]);
}

/** A number written with this decimal mark, or `undefined`. */
export function readNumber(text: string, mark: DecimalMark): number | undefined {
  if (!(mark === "," ? COMMA : POINT).test(text)) return undefined;
  const value = Number(text.replace(",", ".").replaceAll("−", "-"));
  return Number.isFinite(value) ? value : undefined;
}

function numberAdvice(text: string, mark: DecimalMark): string {
  if (GROUPED.test(text)) {
    return `marks of thousands cannot be told from decimal marks; write the number without them`;
  }
  if (/(^|\s)\d{1,2}:\d{2}(:\d{2}([.,]\d+)?)?(\s*[ap]m)?$/i.test(text)) {
    return `a clock time is no number, and past midnight it starts again; write the time since the ` +
      `start, as in "time [min]"`;
  }
  if (/^[+\-−]?\d+\s\d{3}/.test(text)) return `write the number without spaces`;
  if (/^[>≥]/.test(text)) {
    return `a reading above a limit has no value; leave the cell empty and note it elsewhere`;
  }
  return `expected a number with the decimal mark "${mark}"; write one, leave the cell empty where ` +
    `there is no reading, or write <LOQ where it was below the limit`;
}
