import { commensurable, parseUnit } from "../quantity/unit.ts";
import { NumberReader, type ReadTable, timeColumnOf, uncertaintyColumn } from "./column_reader.ts";
import { readHeader } from "./header.ts";
import type { DecimalMark } from "./number_cell.ts";
import { propertyReader } from "./property_value.ts";
import type { RunInput } from "./run.ts";
import { RunFileError } from "./run_file_error.ts";
import { readSignalCells, readTimes } from "./signal_cells.ts";
import type { Table, TableRow } from "./table.ts";

/** Reads a table with one time column and a column a run. Rows right under the headers whose time cell is a
 * header such as `temperature [°C]`, `initial ester [mmol/L]` or `pH` give that fact of every run.
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
  const timeColumn = timeColumnOf(read);
  const timeUnit = (columns[timeColumn] as { unit: string }).unit;
  const { table, facts } = splitFactRows(read.table, timeColumn);
  const runColumns = columns.flatMap((column, i) => column.role === "signal" ? [i] : []);
  checkColumns(read, runColumns);
  const uncertaintyColumns = columns.flatMap((c, i) => c.role === "uncertainty" ? [i] : []);
  const numberColumns = [timeColumn, ...runColumns, ...uncertaintyColumns];
  const numbers = new NumberReader(table, numberColumns, decimal, facts);
  const times = readTimes(table.rows, timeColumn, numbers);
  const runs = runColumns.map((i): RunInput => {
    const column = columns[i] as { name: string; unit: string };
    const known = runFacts(facts, timeColumn, i, numbers);
    const name = species ?? defaultName(column.unit, known);
    const u = uncertaintyColumn(columns, column.name);
    const signal = readSignalCells(table.rows, i, { name, unit: column.unit }, u, numbers);
    return {
      ...known,
      id: column.name,
      times: { values: times, unit: timeUnit },
      signals: [signal],
    };
  });
  numbers.finish();
  return runs;
}

/** Every column but time needs a unit, and the same quantity. */
function checkColumns({ table, columns }: ReadTable, runColumns: readonly number[]): void {
  const fault = (index: number, message: string) =>
    new RunFileError([{
      file: table.file,
      line: table.headerLine,
      column: index + 1,
      cell: table.headers[index],
      message,
    }]);
  const strange = columns.findIndex((c) => !["time", "signal", "uncertainty"].includes(c.role));
  if (strange >= 0) {
    throw fault(
      strange,
      `in a table with a column a run every other column needs the unit of its readings, such as ` +
        `"run 1 [mmol/L]"`,
    );
  }
  if (runColumns.length === 0) {
    throw fault(0, `there is no column of readings; write one such as "run 1 [mmol/L]"`);
  }
  const units = runColumns.map((i) => (columns[i] as { unit: string }).unit);
  const odd = units.findIndex((unit) => !commensurable(parseUnit(unit), parseUnit(units[0])));
  if (odd < 0) return;
  throw fault(
    runColumns[odd],
    `${units[odd]} does not fit the unit of the other runs, ${
      units[0]
    }; a table with a column a run ` +
      `holds one signal`,
  );
}

/** What a signal is called that only has a unit: the species of which the run had some at the start, if that
 * can be told. */
function defaultName(unit: string, known: Pick<RunInput, "initialConcentrations">): string {
  if (["AU", "mAU", "a.u.", "absorbance"].includes(unit)) return "absorbance";
  if (commensurable(parseUnit(unit), parseUnit("mol/L"))) {
    const species = Object.keys(known.initialConcentrations ?? {});
    return species.length === 1 ? species[0] : "A";
  }
  return commensurable(parseUnit(unit), parseUnit("Pa")) ? "pressure" : "signal";
}

/** Takes the rows that give facts of runs off the top of the readings: their time cell is a header. */
function splitFactRows(table: Table, timeColumn: number): { table: Table; facts: TableRow[] } {
  const isFact = (row: TableRow) => /^[^\d+\-−.,<]/.test(row.cells[timeColumn]);
  const first = table.rows.findIndex((row) => !isFact(row));
  const count = first < 0 ? table.rows.length : first;
  return {
    table: { ...table, rows: table.rows.slice(count) },
    facts: table.rows.slice(0, count),
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
  const properties: Record<string, string | number> = {};
  for (const row of facts) {
    if (row.cells[runColumn] === "") continue;
    let header;
    try {
      header = readHeader(row.cells[timeColumn]);
    } catch (error) {
      numbers.fault(row, timeColumn, (error as Error).message);
      continue;
    }
    if (header.role === "property") {
      const own = row.cells.filter((_, i) => i !== timeColumn);
      properties[header.name] = propertyReader(own, numbers.mark)(row.cells[runColumn]);
    } else if (header.role === "temperature") {
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
