import { numberColumns, NumberReader, onlyColumn, type ReadTable } from "./column_reader.ts";
import type { Column } from "./header.ts";
import type { DecimalMark } from "./number_cell.ts";
import { Run, type RunInput } from "./run.ts";
import { RunFileError } from "./run_file_error.ts";
import type { CensoredReading, SignalInput } from "./signal.ts";
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
  const timeColumn = onlyColumn(read, "time");
  if (timeColumn === undefined) throw missingTime(table);
  const runColumn = onlyColumn(read, "run");
  const speciesColumn = onlyColumn(read, "species");
  const numbers = new NumberReader(table, numberColumns(columns), decimal);
  const byRun = Map.groupBy(
    table.rows,
    (row) => runColumn === undefined ? single : row.cells[runColumn],
  );
  const runs = [...byRun].map(([id, rows]) => {
    if (id === "") numbers.fault(rows[0], runColumn!, "the run's name is missing; write it");
    const facts = readFacts(id, rows, columns, numbers);
    return speciesColumn === undefined
      ? { ...facts, ...readSideBySide(rows, columns, timeColumn, numbers) }
      : { ...facts, ...readUnderEachOther(rows, columns, timeColumn, speciesColumn, numbers) };
  });
  numbers.finish();
  return runs;
}

/** The error of a table without time. */
export function missingTime(table: Table): RunFileError {
  return new RunFileError([{
    file: table.file,
    line: table.headerLine,
    message: `there is no time column among ${table.headers.map((h) => `"${h}"`).join(", ")}; ` +
      `call it "time [min]" or another unit of time`,
  }]);
}

type Facts = Pick<RunInput, "id" | "temperature" | "initialConcentrations" | "properties">;

/** Temperature, initial concentrations and properties, which must be the same in all rows of a run. */
function readFacts(
  id: string,
  rows: readonly TableRow[],
  columns: readonly Column[],
  numbers: NumberReader,
): Facts {
  let temperature: string | undefined;
  const initialConcentrations: Record<string, string> = {};
  const properties: Record<string, string | number> = {};
  columns.forEach((column, i) => {
    if (!["temperature", "initial", "property"].includes(column.role)) return;
    const first = rows.find((row) => row.cells[i] !== "");
    if (!first) return;
    const other = rows.find((row) => row.cells[i] !== "" && row.cells[i] !== first.cells[i]);
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
      properties[column.name] = first.cells[i];
      return;
    }
    const value = numbers.required(first, i);
    if (Number.isNaN(value)) return;
    if (column.role === "temperature") temperature = `${value} ${column.unit}`;
    if (column.role === "initial") {
      initialConcentrations[column.species] = `${value} ${column.unit}`;
    }
  });
  return { id, temperature, initialConcentrations, properties };
}

type Readings = Pick<RunInput, "times" | "signals">;

function readSideBySide(
  rows: readonly TableRow[],
  columns: readonly Column[],
  timeColumn: number,
  numbers: NumberReader,
): Readings {
  const times = readTimes(rows, timeColumn, numbers);
  const signals = columns.flatMap((column, i): SignalInput[] => {
    if (column.role !== "signal") return [];
    const u = columns.findIndex((c) => c.role === "uncertainty" && c.signal === column.name);
    const signal = readSignalCells(rows, i, column, u < 0 ? undefined : u, numbers);
    // A run that has no reading of a signal does not have the signal.
    const empty = signal.values.every((v) => Number.isNaN(v)) && signal.censored!.length === 0;
    return empty ? [] : [signal];
  });
  return { times: { values: times, unit: unitOf(columns[timeColumn]) }, signals };
}

function readUnderEachOther(
  rows: readonly TableRow[],
  columns: readonly Column[],
  timeColumn: number,
  speciesColumn: number,
  numbers: NumberReader,
): Readings {
  const valueColumn = columns.findIndex((column) => column.role === "signal");
  const column = columns[valueColumn];
  if (column?.role !== "signal" || columns.filter((c) => c.role === "signal").length !== 1) {
    numbers.fault(
      rows[0],
      speciesColumn,
      `a table with a column "species" needs exactly one column of values, such as "value [mmol/L]"`,
    );
    return { times: [], signals: [] };
  }
  const u = columns.findIndex((c) => c.role === "uncertainty");
  const bySpecies = Map.groupBy(rows, (row) => row.cells[speciesColumn]);
  const unit = unitOf(columns[timeColumn]);
  const read = [...bySpecies].map(([name, own]) => ({
    times: readTimes(own, timeColumn, numbers),
    signal: readSignalCells(own, valueColumn, { ...column, name }, u < 0 ? undefined : u, numbers),
  }));
  const times = [...new Set(read.flatMap((r) => r.times))].sort((a, b) => a - b);
  const signals = read.map(({ times: own, signal }): SignalInput => {
    const place = own.map((time) => times.indexOf(time));
    const spread = (values: ArrayLike<number | null>) => {
      const all = new Array<number>(times.length).fill(NaN);
      place.forEach((at, i) => all[at] = values[i] ?? NaN);
      return all;
    };
    return {
      ...signal,
      values: spread(signal.values),
      standardUncertainties: signal.standardUncertainties && spread(signal.standardUncertainties),
      censored: signal.censored?.map((c) => ({ ...c, index: place[c.index] })),
    };
  });
  return { times: { values: times, unit }, signals };
}

function unitOf(column: Column): string {
  return "unit" in column ? column.unit : "s";
}

/** Times of rows, which may not run backwards. */
export function readTimes(
  rows: readonly TableRow[],
  column: number,
  numbers: NumberReader,
): number[] {
  const times = rows.map((row) => numbers.required(row, column));
  times.forEach((time, i) => {
    if (i > 0 && time < times[i - 1]) {
      numbers.fault(
        rows[i],
        column,
        `time runs backwards, from ${times[i - 1]} in line ${
          rows[i - 1].line
        }; put the readings in ` +
          `order, or name the runs in a column "run" if another one begins here`,
      );
    }
  });
  return times;
}

/** Cells of one signal, with its uncertainties where they have a column. */
export function readSignalCells(
  rows: readonly TableRow[],
  valueColumn: number,
  column: { readonly name: string; readonly unit: string },
  uncertaintyColumn: number | undefined,
  numbers: NumberReader,
): SignalInput {
  const censored: CensoredReading[] = [];
  const values = rows.map((row, index) => {
    const cell = numbers.read(row, valueColumn);
    if (cell.kind === "censored") {
      censored.push({
        index,
        text: cell.text,
        ...(cell.limit === undefined ? {} : { limit: cell.limit }),
      });
    }
    return cell.kind === "number" ? cell.value : NaN;
  });
  const uncertainties = uncertaintyColumn === undefined ? undefined : rows.map((row, i) => {
    if (Number.isNaN(values[i])) return NaN;
    const u = numbers.required(row, uncertaintyColumn);
    if (u <= 0) {
      numbers.fault(row, uncertaintyColumn, "a standard uncertainty must be more than 0");
    }
    return u;
  });
  return {
    name: column.name,
    unit: column.unit,
    values,
    ...(uncertainties === undefined ? {} : { standardUncertainties: uncertainties }),
    censored,
  };
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
