import {
  numberColumns,
  NumberReader,
  onlyColumn,
  type ReadTable,
  timeColumnOf,
  uncertaintyColumn,
} from "./column_reader.ts";
import type { Column } from "./header.ts";
import type { DecimalMark } from "./number_cell.ts";
import { propertyReader } from "./property_value.ts";
import { Run, type RunInput } from "./run.ts";
import { RunFileError } from "./run_file_error.ts";
import type { SignalInput } from "./signal.ts";
import { readSignalCells, readTimes } from "./signal_cells.ts";
import { readUnderEachOther } from "./species_rows.ts";
import type { Table, TableRow } from "./table.ts";

/** Reads a table with a row a reading: one run, or several told apart by a column `run`; signals side by
 * side in columns, or under one another by a column `species`.
 *
 * @param read the table with its columns @param single id of the run where there is no column `run`
 * @param decimal decimal mark, if stated
 * @throws {RunFileError} on faults of cells, a missing time column, times that run backwards, facts that
 * change within a run */
export function readLongTable(
  read: ReadTable,
  single: string,
  decimal: DecimalMark | undefined,
): RunInput[] {
  const { table, columns } = read;
  const timeColumn = timeColumnOf(read);
  const runColumn = onlyColumn(read, "run");
  const speciesColumn = onlyColumn(read, "species");
  const exclusionColumn = onlyColumn(read, "exclusion");
  const numbers = new NumberReader(table, numberColumns(columns), decimal);
  const properties = columns.map((column, i) =>
    column.role === "property"
      ? propertyReader(table.rows.map((row) => row.cells[i]), numbers.mark)
      : undefined
  );
  const byRun = Map.groupBy(
    table.rows,
    (row) => runColumn === undefined ? single : row.cells[runColumn],
  );
  const runs = [...byRun].map(([id, rows]) => {
    if (id === "") numbers.fault(rows[0], runColumn!, "the run's name is missing; write it");
    const facts = readFacts(id, rows, columns, properties, numbers);
    if (speciesColumn !== undefined) {
      return { ...facts, ...readUnderEachOther(rows, columns, timeColumn, speciesColumn, numbers) };
    }
    const exclusions = exclusionColumn === undefined ? [] : rows.flatMap((row, index) => {
      const reason = row.cells[exclusionColumn];
      return reason === "" ? [] : [{ index, reason }];
    });
    return { ...facts, ...readSideBySide(rows, columns, timeColumn, numbers), exclusions };
  });
  numbers.finish();
  return runs;
}

type Facts = Pick<RunInput, "id" | "temperature" | "initialConcentrations" | "properties">;

/** Temperature, initial concentrations and properties, which must be the same in all rows of a run. */
function readFacts(
  id: string,
  rows: readonly TableRow[],
  columns: readonly Column[],
  asProperty: readonly (((cell: string) => string | number) | undefined)[],
  numbers: NumberReader,
): Facts {
  let temperature: string | undefined;
  const initialConcentrations: Record<string, string> = {};
  const properties: Record<string, string | number> = {};
  columns.forEach((column, i) => {
    if (!["temperature", "initial", "property"].includes(column.role)) return;
    const first = rows.find((row) => row.cells[i] !== "");
    if (!first) return;
    const value = column.role === "property" ? NaN : numbers.required(first, i);
    const other = [...new Map(rows.map((row) => [row.cells[i], row])).values()].find((row) =>
      row.cells[i] !== "" && row.cells[i] !== first.cells[i] &&
      (column.role === "property" || numbers.required(row, i) !== value)
    );
    if (other) {
      numbers.fault(
        other,
        i,
        column.role === "property"
          ? `it was "${
            first.cells[i]
          }" in line ${first.line} of the same run; a column without a unit ` +
            `holds facts of a run. Write its unit behind the name, [1] for a pure number, to make it a signal`
          : `it was "${first.cells[i]}" in line ${first.line} of the same run; a run has one`,
      );
    }
    if (column.role === "property") {
      properties[column.name] = asProperty[i]!(first.cells[i]);
      return;
    }
    if (Number.isNaN(value)) return;
    if (column.role === "temperature") temperature = `${value} ${column.unit}`;
    if (column.role === "initial") {
      initialConcentrations[column.species] = `${value} ${column.unit}`;
    }
  });
  return { id, temperature, initialConcentrations, properties };
}

function readSideBySide(
  rows: readonly TableRow[],
  columns: readonly Column[],
  timeColumn: number,
  numbers: NumberReader,
): Pick<RunInput, "times" | "signals"> {
  const times = readTimes(rows, timeColumn, numbers);
  const time = columns[timeColumn];
  const timeUnit = "unit" in time ? time.unit : "s";
  const signals = columns.flatMap((column, i): SignalInput[] => {
    if (column.role !== "signal") return [];
    const u = uncertaintyColumn(columns, column.name);
    const signal = readSignalCells(rows, i, column, u, numbers);
    // A run that has no reading of a signal does not have the signal.
    const empty = signal.values.every((v) => Number.isNaN(v)) && signal.censored!.length === 0;
    return empty ? [] : [signal];
  });
  return { times: { values: times, unit: timeUnit }, signals };
}

/** Makes runs; what a run refuses is told with the file's name.
 *
 * @throws {RunFileError} with the run's own words */
export function makeRuns(inputs: readonly RunInput[], table: Table): Run[] {
  return inputs.map((input) => {
    try {
      return new Run(input);
    } catch (error) {
      if (!(error instanceof RangeError || error instanceof TypeError)) throw error;
      throw new RunFileError([{ file: table.file, message: error.message }]);
    }
  });
}
