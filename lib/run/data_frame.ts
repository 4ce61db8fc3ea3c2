import type { DecimalMark } from "./number_cell.ts";
import { readingRows } from "./reading_rows.ts";
import type { Run } from "./run.ts";
import { cellText } from "./row_objects.ts";
import type { Table } from "./table.ts";

/** The data-frame package. It stands here and not in the import map, and is no literal in the import, so that
 * nobody who does not call for data frames has to download its 370 MB. */
const PACKAGE: string = "npm:danfojs@1.1.2";

/** The part of a data frame that is used here: column names and rows of values. */
export interface DataFrame {
  /** Column names, with units as in file headers. */
  readonly columns: readonly string[];
  /** Values, row by row. */
  readonly values: readonly unknown[];
  /** Number of rows and columns. */
  readonly shape: readonly [number, number];
}

/** Whether a value looks like a data frame. */
export function isDataFrame(value: unknown): value is DataFrame {
  return typeof value === "object" && value !== null && "columns" in value && "values" in value &&
    "shape" in value && Array.isArray(value.columns) && Array.isArray(value.values);
}

/** The table of a data frame; missing values become empty cells. */
export function tableOfDataFrame(frame: DataFrame, decimal?: DecimalMark): Table {
  return {
    file: "data frame",
    headers: frame.columns.map((header) => String(header).trim()),
    headerLine: 0,
    rows: frame.values.map((row, i) => ({
      line: i + 1,
      cells: (row as unknown[]).map((value) => cellText(value, decimal)),
    })).filter((row) => row.cells.some((cell) => cell !== "")),
  };
}

/** Runs as a data frame with a row a reading, headers with units as `readRuns` reads them. Readings below a
 * limit are kept as their text.
 *
 * Loads the data-frame package when called, not before.
 *
 * @param runs the runs
 * @returns a DataFrame of the package danfojs
 * @example There and back
 * ```ts
 * import { deepStrictEqual } from "node:assert";
 * import { readRuns, toDataFrame } from "ratebook";
 *
 * const runs = await readRuns("data/e17_hydrolysis.csv");
 * const back = await readRuns(await toDataFrame(runs));
 * deepStrictEqual(back.find("60a").times, runs.find("60a").times);
 * ``` */
export async function toDataFrame(runs: Iterable<Run>): Promise<DataFrame> {
  const { DataFrame } = await import(PACKAGE);
  return new DataFrame(readingRows([...runs])) as unknown as DataFrame;
}
