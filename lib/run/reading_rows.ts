import { convert, convertDifference, parseUnit, type Unit } from "../quantity/unit.ts";
import type { Run } from "./run.ts";
import type { Signal } from "./signal.ts";

/** A row of readings: keys are headers with units, as `readRuns` reads them. */
export type ReadingRow = Record<string, string | number | null>;

/** Rows of readings, one a time of a run, in the units in which the signals were written. Readings below
 * a limit are their text; a reading that is left out has its reason under `left out`.
 *
 * @param runs the runs
 * @throws {UnitError} if runs have signals of one name that measure different things */
export function readingRows(runs: readonly Run[]): ReadingRow[] {
  const species = unique(runs.flatMap((run) => Object.keys(run.initialConcentrations)));
  const properties = unique(runs.flatMap((run) => Object.keys(run.properties)));
  const signals = runs.flatMap((run) => run.signals);
  const columns = unique(signals.map((signal) => signal.name)).map((name) => {
    const own = signals.filter((signal) => signal.name === name);
    return {
      name,
      unit: own[0].shownUnit,
      uncertain: own.some((signal) => signal.standardUncertainties !== undefined),
    };
  });
  const withTemperature = runs.some((run) => run.temperature !== undefined);
  const withExclusions = runs.some((run) => run.exclusions.length > 0);
  return runs.flatMap((run) =>
    Array.from(run.times, (time, i) => {
      const row: ReadingRow = { run: run.id };
      if (withTemperature) row["temperature [K]"] = run.temperature ?? null;
      for (const name of species) {
        row[`initial ${name} [mol/L]`] = run.initialConcentrations[name] ?? null;
      }
      for (const name of properties) row[name] = run.properties[name] ?? null;
      row["time [s]"] = time;
      for (const { name, unit, uncertain } of columns) {
        const signal = run.signals.find((s) => s.name === name);
        row[`${name} [${unit}]`] = signal ? reading(signal, i, unit) : null;
        if (uncertain) row[`u(${name}) [${unit}]`] = signal ? uncertainty(signal, i, unit) : null;
      }
      if (withExclusions) {
        row["left out"] = run.exclusions.find((e) => e.index === i)?.reason ?? null;
      }
      return row;
    })
  );
}

function reading(signal: Signal, index: number, unit: string): string | number | null {
  const censored = signal.censored.find((reading) => reading.index === index);
  if (!censored) return shown(signal.values[index], signal.unit, unit, convert);
  if (censored.limit === undefined) return censored.text;
  return `<${shown(censored.limit, signal.unit, unit, convert)}`;
}

function uncertainty(signal: Signal, index: number, unit: string): number | null {
  const u = signal.standardUncertainties?.[index] ?? NaN;
  return shown(u, signal.unit, unit, convertDifference);
}

/** A value in the shown unit: the shortest number that converts back to the same value. */
function shown(
  value: number,
  unit: string,
  shownUnit: string,
  change: (value: number, from: Unit, to: Unit) => number,
): number | null {
  if (Number.isNaN(value)) return null;
  const [from, to] = [parseUnit(unit), parseUnit(shownUnit)];
  const there = change(value, from, to);
  for (const digits of [15, 16, 17]) {
    const short = Number(there.toPrecision(digits));
    if (change(short, to, from) === value) return short;
  }
  return there;
}

function unique(names: readonly string[]): string[] {
  return [...new Set(names)];
}
