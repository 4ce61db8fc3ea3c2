import { convertDifference, parseUnit } from "../quantity/unit.ts";
import type { NumberReader, UncertaintyColumn } from "./column_reader.ts";
import type { CensoredReading, SignalInput } from "./signal.ts";
import type { TableRow } from "./table.ts";

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
  uncertainty: UncertaintyColumn | undefined,
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
  const uncertainties = uncertainty && rows.map((row, i) => {
    if (Number.isNaN(values[i])) return NaN;
    const u = numbers.required(row, uncertainty.index);
    if (u <= 0) {
      numbers.fault(row, uncertainty.index, "a standard uncertainty must be more than 0");
    }
    return convertDifference(u, parseUnit(uncertainty.unit), parseUnit(column.unit));
  });
  return {
    name: column.name,
    unit: column.unit,
    values,
    ...(uncertainties === undefined ? {} : { standardUncertainties: uncertainties }),
    censored,
  };
}
