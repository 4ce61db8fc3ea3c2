import type { Caution } from "../quantity/caution.ts";
import * as option from "../quantity/options.ts";
import type { Source } from "../quantity/result.ts";
import { commensurable, parseUnit } from "../quantity/unit.ts";
import { readColumns, type ReadTable, timeColumnOf } from "./column_reader.ts";
import { type DataFrame, isDataFrame, tableOfDataFrame } from "./data_frame.ts";
import { type RunFacts, withFacts } from "./run_facts.ts";
import { makeRuns, readLongTable } from "./long_table.ts";
import type { DecimalMark } from "./number_cell.ts";
import type { Run, RunInput } from "./run.ts";
import { RunFileError } from "./run_file_error.ts";
import { RunSet } from "./run_set.ts";
import { readSource, type TextSource } from "./source_text.ts";
import { type RowObjects, tableOfRows } from "./row_objects.ts";
import { readTable, type Separator, type Table } from "./table.ts";
import { readWideTable } from "./wide_table.ts";

/** What {@link readRuns} reads: a path, a file: URL, a file, text with a name, rows, a data frame; or
 * several of the first four. */
export type RunSource = TextSource | RowObjects | DataFrame | readonly TextSource[];

/** How {@link readRuns} reads. */
export interface ReadRunsOptions extends RunFacts {
  /** "long": a row a reading; "wide": one time column and a column a run; "single": the columns are
   * signals of one run. Found out from the headers where left out. */
  layout?: "long" | "wide" | "single";
  /** Between cells; found out from the header line where left out. */
  separator?: Separator;
  /** Decimal mark; found out from all numbers of the file together where left out. */
  decimal?: DecimalMark;
  /** Name of the signal in a table with a column a run. */
  species?: string;
  /** Facts of single runs, by id; they win over those for all runs. */
  runs?: Record<string, RunFacts>;
}

const facts = {
  temperature: option.quantity("K", { above: 0 }),
  initial: option.record(option.quantity("mol/L", { atLeast: 0 })),
};

const READERS = {
  layout: option.oneOf("long", "wide", "single"),
  separator: option.oneOf<Separator>(",", ";", "\t"),
  decimal: option.oneOf<DecimalMark>(".", ","),
  species: option.text,
  ...facts,
  runs: option.record((value, name) => option.readOptions(name, value, facts)),
};

/** Reads runs from files, text, rows or a data frame.
 *
 * Headers carry units: `time [min]`, `ester [mmol/L]`, `temperature [°C]`, `initial ester [mmol/L]`,
 * `u(ester) [mmol/L]` for a standard uncertainty, `run` for the run's name; a column without a unit is a
 * fact of the run. Long tables have a row a reading, wide ones a column a run. Readings below a limit
 * (`<0.15`, `n.d.`) stay marked as such and are never 0. What can be read in two ways is an error with
 * its place; nothing is repaired.
 *
 * @param source what to read
 * @param options layout, separator, decimal mark, and facts that the file lacks
 * @returns the runs, with name and SHA-256 of each file
 * @throws {RunFileError} listing file, line, column, cell and what to write instead
 * @throws {TypeError} on a source or an option of the wrong type
 * @example
 * ```ts
 * import { strictEqual } from "node:assert";
 * import { readRuns } from "ratebook";
 *
 * const text = "time [min];1 [mmol/L];2 [mmol/L]\n0;10,0;5,0\n5;7,8;3,9\n10;6,1;n.d.\n";
 * const runs = await readRuns({ name: "two.csv", text });
 * strictEqual(runs.find("2").signal().values[1], 0.0039);
 * strictEqual(runs.find("2").signal().censored[0].text, "n.d.");
 * ``` */
export async function readRuns(source: RunSource, options: ReadRunsOptions = {}): Promise<RunSet> {
  const read = option.readOptions("readRuns", options, READERS);
  const sources: Source[] = [];
  const notes: Caution[] = [];
  const runs: Run[] = [];
  for (const { table, from } of await tablesOf(source, read)) {
    if (from) sources.push(from);
    const columns = readColumns(table);
    const { inputs, note } = readInputs(columns, read);
    if (note) notes.push(note);
    for (const run of makeRuns(inputs, table)) {
      const other = runs.find(({ id }) => id === run.id);
      if (other) throw sameId(run.id, table.file, sources);
      const facts = withFacts(run, read);
      runs.push(facts.run);
      notes.push(...facts.notes);
    }
  }
  const unknown = Object.keys(read.runs ?? {}).find((id) => !runs.some((run) => run.id === id));
  if (unknown !== undefined) {
    throw new RangeError(
      `Cannot give facts of run "${unknown}": the file has ${runs.map((run) => run.id).join(", ")}`,
    );
  }
  return new RunSet(runs, sources, notes);
}

async function tablesOf(
  source: RunSource,
  { separator, decimal }: ReadRunsOptions,
): Promise<{ table: Table; from?: Source }[]> {
  if (isDataFrame(source)) return [{ table: tableOfDataFrame(source, decimal) }];
  if (Array.isArray(source) && source.length > 0 && source.every(isRow)) {
    return [{ table: tableOfRows(source as RowObjects, "rows", decimal) }];
  }
  const list = (Array.isArray(source) ? source : [source]) as readonly TextSource[];
  if (list.length === 0) throw new RangeError(`Cannot read runs from no file: name at least one`);
  const tables = [];
  for (const one of list) {
    if (!isTextSource(one)) {
      throw new TypeError(
        `Cannot read runs from ${
          JSON.stringify(one)
        }: expected a path, a file: URL, a file, { name, text }, rows or a data frame`,
      );
    }
    const { text, source: from } = await readSource(one);
    tables.push({ table: await readTable(text, from.name, separator), from });
  }
  return tables;
}

function isTextSource(value: unknown): value is TextSource {
  if (typeof value === "string" || value instanceof URL || value instanceof Blob) return true;
  return typeof value === "object" && value !== null && "name" in value && "text" in value &&
    typeof value.name === "string" && typeof value.text === "string";
}

function isRow(value: unknown): boolean {
  return typeof value === "object" && value !== null && !isTextSource(value) &&
    !Array.isArray(value);
}

interface Layout {
  readonly inputs: readonly RunInput[];
  readonly note?: Caution;
}

function readInputs(
  columns: ReadTable,
  read: option.ReadOptions<typeof READERS>,
): Layout {
  const { table } = columns;
  timeColumnOf(columns);
  const single = table.file.replace(/\.[^.]*$/, "");
  const roles = columns.columns.map((column) => column.role);
  const long = () => ({ inputs: readLongTable(columns, single, read.decimal) });
  const species = read.species ?? onlyKey(read.initial);
  const wide = () => ({ inputs: readWideTable(columns, species, read.decimal) });
  if (read.layout === "wide") return wide();
  if (read.layout === "long" && !roles.includes("run")) {
    throw new RunFileError([{
      file: table.file,
      line: table.headerLine,
      message:
        `a long table of several runs needs a column "run"; add it, or say layout: "single" for ` +
        `one run`,
    }]);
  }
  if (read.layout !== undefined || roles.includes("run") || roles.includes("species")) {
    return long();
  }
  const signals = columns.columns.filter((column) => column.role === "signal");
  if (signals.length < 2) return long();
  // Facts of a run in columns of their own only make sense for one run.
  if (roles.some((role) => ["temperature", "initial", "exclusion"].includes(role))) return long();
  const [first, ...rest] = signals.map((column) => column.role === "signal" ? column.unit : "1");
  const alike = rest.every((unit) => commensurable(parseUnit(unit), parseUnit(first)));
  if (!alike) {
    throw new RunFileError([{
      file: table.file,
      line: table.headerLine,
      message:
        `the columns have different units (${
          [...new Set([first, ...rest])].join(", ")
        }) and there is no column "run": say layout: "single" if they are signals of one run, or give all ` +
        `columns one unit if each is a run`,
    }]);
  }
  return {
    ...wide(),
    note: {
      code: "read-as-wide",
      severity: "note",
      subject: table.file,
      message:
        `${table.file} was read with a column a run; say layout: "single" if its columns are ` +
        `signals of one run`,
    },
  };
}

function onlyKey(facts: Readonly<Record<string, unknown>> = {}): string | undefined {
  const keys = Object.keys(facts);
  return keys.length === 1 ? keys[0] : undefined;
}

function sameId(id: string, file: string, sources: readonly Source[]): RunFileError {
  const files = sources.map((source) => source.name).join(", ");
  return new RunFileError([{
    file,
    message: `a run "${id}" is there already (files ${files}); give every run a name of its own`,
  }]);
}
