import { type NumberReader, uncertaintyColumn } from "./column_reader.ts";
import type { Column } from "./header.ts";
import type { RunInput } from "./run.ts";
import type { SignalInput } from "./signal.ts";
import { readSignalCells, readTimes } from "./signal_cells.ts";
import type { TableRow } from "./table.ts";

/** Reads the rows of one run whose signals stand under one another, told apart by a column `species`. Series
 * with different times are put on all times together, without a reading where a series has none; a time that
 * a series has twice is kept twice. */
export function readUnderEachOther(
  rows: readonly TableRow[],
  columns: readonly Column[],
  timeColumn: number,
  speciesColumn: number,
  numbers: NumberReader,
): Pick<RunInput, "times" | "signals"> {
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
  if (columns.some((c) => c.role === "exclusion")) {
    numbers.fault(
      rows[0],
      columns.findIndex((c) => c.role === "exclusion"),
      `in a table with a column "species" a reading cannot be left out by a column; read it and use ` +
        `run.without(indices, reason)`,
    );
  }
  const nameless = rows.find((row) => row.cells[speciesColumn] === "");
  if (nameless) {
    numbers.fault(nameless, speciesColumn, "the name of the species is missing; write it");
    return { times: [], signals: [] };
  }
  const u = uncertaintyColumn(columns, column.name);
  const bySpecies = Map.groupBy(rows, (row) => row.cells[speciesColumn]);
  const time = columns[timeColumn];
  const unit = "unit" in time ? time.unit : "s";
  const read = [...bySpecies].map(([name, own]) => ({
    times: readTimes(own, timeColumn, numbers),
    signal: readSignalCells(own, valueColumn, { ...column, name }, u, numbers),
  }));
  const times = commonTimes(read.map((r) => r.times));
  const signals = read.map(({ times: own, signal }): SignalInput => {
    const place = own.map((time, i) => times.indexOf(time) + (i - own.indexOf(time)));
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

/** All times of several series in order; a time that a series has twice is there twice. */
function commonTimes(series: readonly (readonly number[])[]): number[] {
  const often = new Map<number, number>();
  for (const times of series) {
    for (const [time, own] of Map.groupBy(times, (time) => time)) {
      often.set(time, Math.max(often.get(time) ?? 0, own.length));
    }
  }
  return [...often].sort(([a], [b]) => a - b)
    .flatMap(([time, count]) => new Array<number>(count).fill(time));
}
