import { type FilePlace, RunFileError, type RunFileFault } from "./run_file_error.ts";

/** A table of text cells as it stands in a file, blank rows left out, places kept. */
export interface Table {
  /** File name. */
  readonly file: string;
  /** Header cells. */
  readonly headers: readonly string[];
  /** Line of the headers, from 1. */
  readonly headerLine: number;
  /** Rows under it. */
  readonly rows: readonly TableRow[];
}

/** A row of a table. */
export interface TableRow {
  /** Its line in the file, from 1. */
  readonly line: number;
  /** Cells, trimmed, as many as headers. */
  readonly cells: readonly string[];
}

/** A record with the line it ends in. */
interface CsvRecord {
  readonly record: readonly string[];
  readonly info: { readonly lines: number };
}

/** What is used of the CSV parser. */
interface CsvParser {
  parse(text: string, options: Readonly<Record<string, unknown>>): readonly CsvRecord[];
}

/** Separators of cells. */
export type Separator = "," | ";" | "\t";

/** The parser; no literal in the import, so that it is not looked at before a file is read. */
const PARSER: string = "csv-parse/sync";

const SEPARATORS: readonly Separator[] = ["\t", ";", ","];

/** Reads delimited text into a table. The separator is that which the header line has outside quotes and
 * brackets, tab before semicolon before comma.
 *
 * @param text the file's text, without byte-order mark
 * @param file its name @param separator the separator, if it was given
 * @throws {RunFileError} if the file is empty or a row has more or fewer cells than the header */
export async function readTable(text: string, file: string, separator?: Separator): Promise<Table> {
  const { parse }: CsvParser = await import(PARSER);
  const delimiter = separator ?? detectSeparator(text);
  let records: readonly CsvRecord[];
  try {
    records = parse(text, {
      delimiter,
      info: true,
      relax_column_count: true,
      skip_empty_lines: false,
      trim: true,
      bom: true,
    });
  } catch (error) {
    const line = (error as { lines?: number }).lines;
    throw new RunFileError([{
      file,
      line,
      message: `the quotation marks do not pair up (${(error as Error).message})`,
    }]);
  }
  const filled = records
    .map(({ record, info }) => ({ line: info.lines, cells: record.map((cell) => cell.trim()) }))
    .filter((row) => row.cells.some((cell) => cell !== ""));
  const [head, ...rows] = filled;
  if (!head) throw new RunFileError([{ file, message: "the file is empty" }]);
  const headers = withoutEmptyTail(head.cells);
  if (rows.length === 0) {
    throw new RunFileError([{ file, message: "there are no readings under the header" }]);
  }
  const faults = rows.flatMap((row) => unequalCells(file, row, headers.length, delimiter) ?? []);
  if (faults.length > 0) throw new RunFileError(faults);
  return {
    file,
    headers,
    headerLine: head.line,
    rows: rows.map(({ line, cells }) => ({
      line,
      cells: headers.map((_, i) => cells[i] ?? ""),
    })),
  };
}

/** The fault of a row that has not as many cells as the header; empty cells at its end do not count as too
 * many. */
function unequalCells(
  file: string,
  row: TableRow,
  expected: number,
  delimiter: Separator,
): RunFileFault | undefined {
  const least = withoutEmptyTail(row.cells).length;
  if (least <= expected && row.cells.length >= expected) return undefined;
  const mark = delimiter === "\t" ? "a tab" : `"${delimiter}"`;
  const advice = least > expected
    ? `quote cells that hold the separator ${mark}` +
      (delimiter === "," ? `, write decimal commas only in a file separated by ";"` : "") +
      `, or say which separator it is with the option "separator"`
    : `write ${mark} for every empty cell too, so that none can shift`;
  return {
    file,
    line: row.line,
    cell: row.cells.join(delimiter),
    message: `the row has ${Math.max(least, Math.min(row.cells.length, expected))} cells and the ` +
      `header ${expected}; ${advice}`,
  };
}

/** The place of a cell. */
export function placeOf(table: Table, row: TableRow, column: number): FilePlace {
  return {
    file: table.file,
    line: row.line,
    column: column + 1,
    header: table.headers[column],
    cell: row.cells[column],
  };
}

function detectSeparator(text: string): Separator {
  const first = text.split(/\r?\n|\r/).find((line) => line.trim() !== "") ?? "";
  const bare = first.replaceAll(/"[^"]*"/g, "").replaceAll(/\[[^\]]*\]|\([^)]*\)/g, "");
  return SEPARATORS.find((separator) => bare.includes(separator)) ?? ",";
}

function withoutEmptyTail(cells: readonly string[]): string[] {
  let end = cells.length;
  while (end > 0 && cells[end - 1] === "") end--;
  return cells.slice(0, end);
}
