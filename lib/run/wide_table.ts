import { NumberReader, onlyColumn, type ReadTable } from "./column_reader.ts";
import { readHeader } from "./header.ts";
import { missingTime, readSignalCells, readTimes } from "./long_table.ts";
import type { DecimalMark } from "./number_cell.ts";
import type { RunInput } from "./run.ts";
import { RunFileError } from "./run_file_error.ts";
import type { Table, TableRow } from "./table.ts";

/** Reads a table with one time column and a column a run. Rows whose first cell is a header such as
 * `temperature [°C]` or `initial ester [mmol/L]` give that fact of every run.
 *
 * @param read the table with its columns @param species name of the signal, if stated
 * @param decimal decimal mark, if stated
 * @throws {RunFileError} on faults of cells, a missing time column, or columns of different units */
export function readWideTable(
  read: ReadTable,
  species: string | undefined,
  decimal: DecimalMark | undefined,
): RunInput[] {
  const { columns } = read;
  const timeColumn = onlyColumn(read, "time");
  if (timeColumn === undefined) throw missingTime(read.table);
  const timeUnit = (columns[timeColumn] as { unit: string }).unit;
  const { table, facts } = splitFactRows(read.table, timeColumn);
  const runColumns = columns.flatMap((column, i) => column.role === "signal" ? [i] : []);
  const strange = columns.findIndex((c) => !["time", "signal"].includes(c.role));
  if (strange >= 0) {
    throw new RunFileError([{
      file: table.file,
      line: table.headerLine,
      column: strange + 1,
      cell: table.headers[strange],
      message:
        `in a table with a column a run every other column needs the unit of its readings, such ` +
        `as "run 1 [mmol/L]"`,
    }]);
  }
  const numbers = new NumberReader(table, [timeColumn, ...runColumns], decimal, facts);
  const times = readTimes(table.rows, timeColumn, numbers);
  const runs = runColumns.map((i): RunInput => {
    const column = columns[i] as { name: string; unit: string };
    const name = species ?? defaultName(column.unit);
    const signal = readSignalCells(table.rows, i, { name, unit: column.unit }, undefined, numbers);
    return {
      ...runFacts(facts, timeColumn, i, numbers),
      id: column.name,
      times: { values: times, unit: timeUnit },
      signals: [signal],
    };
  });
  numbers.finish();
  return runs;
}

/** What a signal is called that only has a unit. */
function defaultName(unit: string): string {
  if (["AU", "mAU", "a.u.", "absorbance"].includes(unit)) return "absorbance";
  if (/mol|^[mµunp]?M$|molecule/.test(unit)) return "A";
  return /Pa|bar|torr|atm/i.test(unit) ? "pressure" : "signal";
}

/** Takes the rows that give facts of runs out of the readings: their time cell is a header. */
function splitFactRows(table: Table, timeColumn: number): { table: Table; facts: TableRow[] } {
  const isFact = (row: TableRow) => /^[^\d+\-−.,<]/.test(row.cells[timeColumn]);
  return {
    table: { ...table, rows: table.rows.filter((row) => !isFact(row)) },
    facts: table.rows.filter(isFact),
  };
}

function runFacts(
  facts: readonly TableRow[],
  timeColumn: number,
  runColumn: number,
  numbers: NumberReader,
): Pick<RunInput, "temperature" | "initialConcentrations" | "properties"> {
  let temperature: string | undefined;
  const initialConcentrations: Record<string, string> = {};
  const properties: Record<string, string> = {};
  for (const row of facts) {
    if (row.cells[runColumn] === "") continue;
    let header;
    try {
      header = readHeader(row.cells[timeColumn]);
    } catch (error) {
      numbers.fault(row, timeColumn, (error as Error).message);
      continue;
    }
    if (header.role === "property") properties[header.name] = row.cells[runColumn];
    else if (header.role === "temperature") {
      temperature = `${numbers.required(row, runColumn)} ${header.unit}`;
    } else if (header.role === "initial") {
      initialConcentrations[header.species] = `${numbers.required(row, runColumn)} ${header.unit}`;
    } else {
      numbers.fault(
        row,
        timeColumn,
        `expected a time, or a fact of the runs such as "temperature [°C]" or "initial A [mmol/L]"`,
      );
    }
  }
  return { temperature, initialConcentrations, properties };
}
