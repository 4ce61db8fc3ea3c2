import { formatFixed, formatNumber } from "../quantity/number_format.ts";
import type { Cell, Row, Section } from "../quantity/section.ts";
import type { Exclusion } from "./exclusion.ts";
import type { Signal } from "./signal.ts";

/** The part of a run that is shown. */
export interface ShownRun {
  /** Temperature, K. */
  readonly temperature?: number;
  /** Initial concentrations by species, mol/L. */
  readonly initialConcentrations: Readonly<Record<string, number>>;
  /** Anything else that is known. */
  readonly properties: Readonly<Record<string, string | number>>;
  /** Times, s. */
  readonly times: Float64Array;
  /** Measured signals. */
  readonly signals: readonly Signal[];
  /** Readings left out of fits. */
  readonly exclusions: readonly Exclusion[];
}

/** Readings shown from the start and from the end of a long run. */
const SHOWN_OF_EACH_END = 20;

/** What a run shows: its facts and its readings, the middle of a long run left away and said so. */
export function runSections(run: ShownRun): Section[] {
  const count = run.times.length;
  const all = Array.from(run.times, (_, i) => i);
  const hidden = count - 2 * SHOWN_OF_EACH_END;
  if (hidden <= SHOWN_OF_EACH_END) return [...facts(run), readingsTable(run, all)];
  const ends = all.filter((i) => i < SHOWN_OF_EACH_END || i >= count - SHOWN_OF_EACH_END);
  return [...facts(run), readingsTable(run, ends), {
    kind: "statement",
    key: "notShown",
    text: `${hidden} readings between ${run.times[SHOWN_OF_EACH_END - 1]} s and ` +
      `${run.times[count - SHOWN_OF_EACH_END]} s are not shown`,
  }];
}

function facts(run: ShownRun): Section[] {
  const { temperature } = run;
  const rows: Row[] = [
    ...(temperature === undefined ? [] : [{
      key: "temperature",
      label: "temperature",
      value: { value: temperature, text: formatFixed(temperature, 2) + " K" },
    }]),
    ...Object.entries(run.initialConcentrations).map(([species, value]) => ({
      key: `initial ${species}`,
      label: `initial ${species}`,
      value,
      unit: "mol/L",
    })),
    ...Object.entries(run.properties).map(([key, value]) => ({ key, label: key, value })),
  ];
  return rows.length === 0 ? [] : [{ kind: "values", rows }];
}

/** A table of some readings of a run.
 *
 * @param run the run @param indices which readings */
export function readingsTable(
  run: ShownRun,
  indices: readonly number[],
): Extract<Section, { kind: "table" }> {
  const columns: { key: string; label: string; cell: (index: number) => Cell }[] = [
    { key: "time", label: "time / s", cell: (i) => run.times[i] },
    ...run.signals.flatMap(signalColumns),
    ...(run.exclusions.length === 0 ? [] : [{
      key: "leftOut",
      label: "left out",
      cell: (i: number) => run.exclusions.find(({ index }) => index === i)?.reason ?? "",
    }]),
  ];
  return {
    kind: "table",
    key: "readings",
    columns: columns.map(({ key, label }) => ({ key, label })),
    rows: indices.map((index) => columns.map(({ cell }) => cell(index))),
  };
}

function signalColumns(
  signal: Signal,
): { key: string; label: string; cell: (i: number) => Cell }[] {
  const label = (name: string) => signal.unit === "1" ? name : `${name} / ${inLabel(signal.unit)}`;
  const value = {
    key: signal.name,
    label: label(signal.name),
    cell: (i: number): Cell =>
      Number.isNaN(signal.values[i])
        ? signal.censored.find(({ index }) => index === i)?.text ?? null
        : signal.values[i],
  };
  const u = signal.standardUncertainties;
  if (!u) return [value];
  const name = `u(${signal.name})`;
  return [value, {
    key: name,
    label: label(name),
    cell: (i) => Number.isNaN(u[i]) ? null : { value: u[i], text: formatNumber(u[i], 2) },
  }];
}

/** A unit behind the solidus of a label: (mol/L), but Pa. */
function inLabel(unit: string): string {
  return /[\s/·]/.test(unit) ? `(${unit})` : unit;
}
