import type { Caution } from "../quantity/caution.ts";
import { formatFixed, formatNumber } from "../quantity/number_format.ts";
import { Result, type Source } from "../quantity/result.ts";
import type { Section } from "../quantity/section.ts";
import { type ReadingRow, readingRows } from "./reading_rows.ts";
import { Run } from "./run.ts";

/** Several runs, with the files they came from. */
export class RunSet extends Result implements Iterable<Run> {
  /** Kind of result. */
  override readonly kind: string = "run-set";
  /** The runs, in the order of the file. */
  readonly runs: readonly Run[];
  /** Files that were read, with their SHA-256. */
  override readonly sources: readonly Source[];
  readonly #notes: readonly Caution[];

  /** A set of these runs.
   *
   * @param runs the runs @param sources the files behind them @param notes how they were read
   * @throws {TypeError} if something else is among them @throws {RangeError} if two have one id */
  constructor(
    runs: readonly Run[],
    sources: readonly Source[] = [],
    notes: readonly Caution[] = [],
  ) {
    super();
    for (const run of runs) {
      if (!(run instanceof Run)) throw new TypeError(`Cannot put ${String(run)} among runs`);
    }
    const ids = runs.map((run) => run.id);
    const twice = ids.find((id, i) => ids.indexOf(id) !== i);
    if (twice !== undefined) {
      throw new RangeError(`Cannot put two runs called "${twice}" together: rename one`);
    }
    this.runs = [...runs];
    this.sources = sources;
    this.#notes = notes;
  }

  /** Number of runs. */
  get length(): number {
    return this.runs.length;
  }

  /** The runs one by one. */
  [Symbol.iterator](): Iterator<Run> {
    return this.runs[Symbol.iterator]();
  }

  /** The run of this id.
   *
   * @throws {RangeError} if there is none */
  find(id: string): Run {
    const found = this.runs.find((run) => run.id === id);
    if (found) return found;
    throw new RangeError(
      `Cannot find run "${id}": there are ${this.runs.map((run) => run.id).join(", ") || "none"}`,
    );
  }

  /** The runs that pass a test; the files stay listed. */
  filter(test: (run: Run) => boolean): RunSet {
    return new RunSet(this.runs.filter(test), this.sources, this.#notes);
  }

  /** A copy with every run changed by a function that gives back a run. */
  map(change: (run: Run) => Run): RunSet {
    return new RunSet(this.runs.map(change), this.sources, this.#notes);
  }

  /** Sets of runs that share a value: their temperature in K (to 0.01 K), or what a function gives.
   *
   * @param key "temperature", or a function of a run
   * @returns sets by the value as text, in order of appearance
   * @throws {RangeError} by temperature, if a run has none */
  groupBy(key: "temperature" | ((run: Run) => string | number)): Map<string, RunSet> {
    const valueOf = typeof key === "function" ? key : temperatureKey;
    const groups = Map.groupBy(this.runs, (run) => String(valueOf(run)));
    return new Map(
      [...groups].map(([value, runs]) => [value, new RunSet(runs, this.sources, this.#notes)]),
    );
  }

  /** A row a time of a run, for tables: keys are headers with units, as `readRuns` reads them. */
  readings(): ReadingRow[] {
    return readingRows(this.runs);
  }

  /** First line of every view. */
  override get title(): string {
    const files = this.sources.map((source) => source.name).join(", ");
    return `${this.length} run${this.length === 1 ? "" : "s"}${files ? ` from ${files}` : ""}`;
  }

  /** What the reader must know. */
  override get cautions(): readonly Caution[] {
    return [...this.#notes, ...this.runs.flatMap((run) => run.cautions)];
  }

  /** The content, in reading order. */
  override sections(): Section[] {
    const species = [
      ...new Set(this.runs.flatMap((run) => Object.keys(run.initialConcentrations))),
    ];
    const censored = this.runs.some((run) =>
      run.signals.some((signal) => signal.censored.length > 0)
    );
    return [{
      kind: "table",
      key: "runs",
      columns: [
        { key: "run", label: "run" },
        { key: "temperature", label: "T / K" },
        { key: "signals", label: "signals" },
        { key: "readings", label: "readings" },
        { key: "firstTime", label: "first time / s" },
        { key: "lastTime", label: "last time / s" },
        ...species.map((name) => ({
          key: `initial ${name}`,
          label: `initial ${name} / (mol/L)`,
        })),
        ...(censored ? [{ key: "belowLimit", label: "below limit" }] : []),
      ],
      rows: this.runs.map((run) => [
        run.id,
        run.temperature === undefined
          ? null
          : { value: run.temperature, text: formatFixed(run.temperature, 2) },
        run.signals.map((s) => `${s.name} (${s.shownUnit})`).join(", "),
        run.times.length,
        run.times[0] ?? null,
        run.times[run.times.length - 1] ?? null,
        ...species.map((name) => run.initialConcentrations[name] ?? null),
        ...(censored ? [run.signals.reduce((sum, signal) => sum + signal.censored.length, 0)] : []),
      ]),
    }, ...this.#sourceSection()];
  }

  #sourceSection(): Section[] {
    if (this.sources.length === 0) return [];
    return [{
      kind: "statement",
      key: "files",
      text: this.sources.map((source) =>
        `${source.name}: ${formatNumber(source.bytes, 6).replace(/\..*/, "")} bytes, SHA-256 ${
          source.sha256.slice(0, 12)
        }…`
      ).join("; "),
    }];
  }
}

function temperatureKey(run: Run): number {
  if (run.temperature !== undefined) return Number(run.temperature.toFixed(2));
  throw new RangeError(
    `Cannot group run "${run.id}" by temperature: it has none; give it in the file or with ` +
      `run.with({ temperature: "25 °C" })`,
  );
}
