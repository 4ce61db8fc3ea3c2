import type { DecimalMark } from "./number_cell.ts";
import type { Table } from "./table.ts";

/** Rows as objects, keys being headers with their units. */
export type RowObjects = readonly Readonly<Record<string, string | number | null | undefined>>[];

/** The table of rows given as objects; what is not there, null and NaN are empty cells.
 *
 * @param rows the rows @param name what to call them in messages
 * @param decimal decimal mark of the texts among them, if stated */
export function tableOfRows(rows: RowObjects, name: string, decimal?: DecimalMark): Table {
  const headers = [...new Set(rows.flatMap((row) => Object.keys(row)))];
  return {
    file: name,
    headers: headers.map((header) => header.trim()),
    headerLine: 0,
    rows: rows.map((row, i) => ({
      line: i + 1,
      cells: headers.map((header) => cellText(row[header], decimal)),
    })).filter((row) => row.cells.some((cell) => cell !== "")),
  };
}

/** A value of a program as a cell: a number is written with the decimal mark of the other cells. */
export function cellText(value: unknown, decimal: DecimalMark = "."): string {
  if (value === null || value === undefined || Number.isNaN(value)) return "";
  return typeof value === "number" ? String(value).replace(".", decimal) : String(value).trim();
}
