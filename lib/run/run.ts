import type { Caution } from "../quantity/caution.ts";
import { formatNumber } from "../quantity/number_format.ts";
import { type Quantity, readQuantity } from "../quantity/read_quantity.ts";
import { Result } from "../quantity/result.ts";
import { cellJson, type Section } from "../quantity/section.ts";
import { convert, parseUnit } from "../quantity/unit.ts";
import { readingsTable, runSections } from "./run_sections.ts";
import { sharedCaution } from "./shared_uncertainty.ts";
import { type Exclusion, readExclusions } from "./exclusion.ts";
import { readSignal, sameLength, type Signal, type SignalInput } from "./signal.ts";

export type { Exclusion } from "./exclusion.ts";

/** Times as a user writes them: numbers in s, or numbers with their unit. */
export type TimesInput =
  | readonly number[]
  | Float64Array
  | { values: readonly number[] | Float64Array; unit: string };

/** A run as a user writes it. */
export interface RunInput {
  /** What the run is called. */
  id: string;
  /** Temperature, K, or text with its unit. */
  temperature?: Quantity;
  /** Initial concentrations by species, mol/L, or text with their units. */
  initialConcentrations?: Readonly<Record<string, Quantity>>;
  /** Anything else that is known: pH, operator, batch. */
  properties?: Readonly<Record<string, string | number>>;
  /** Times of the readings; they may repeat but not run backwards. */
  times: TimesInput;
  /** Measured signals. */
  signals: readonly (SignalInput | Signal)[];
  /** Readings that are left out of fits, with the reason; they stay listed. */
  exclusions?: readonly Exclusion[];
  /** What a reader must know about how the run came about. */
  notes?: readonly Caution[];
}

/** One run: a reaction followed in time under known conditions.
 *
 * @example
 * ```ts
 * import { strictEqual } from "node:assert";
 * import { Run } from "ratebook";
 *
 * const run = new Run({
 *   id: "7",
 *   temperature: "25 °C",
 *   initialConcentrations: { ester: "10 mmol/L" },
 *   times: { values: [0, 5, 10], unit: "min" },
 *   signals: [{ name: "ester", unit: "mmol/L", values: [10, 7.8, 6.1] }],
 * });
 * strictEqual(run.times[1], 300);
 * strictEqual(run.signal().values[0], 0.01);
 * ``` */
export class Run extends Result {
  /** Kind of result. */
  override readonly kind: string = "run";
  /** What the run is called. */
  readonly id: string;
  /** Temperature, K. */
  readonly temperature?: number;
  /** Initial concentrations by species, mol/L. */
  readonly initialConcentrations: Readonly<Record<string, number>>;
  /** Anything else that is known. */
  readonly properties: Readonly<Record<string, string | number>>;
  /** Times of the readings, s. */
  readonly times: Float64Array;
  /** Measured signals. */
  readonly signals: readonly Signal[];
  /** Readings left out of fits, with the reason. */
  readonly exclusions: readonly Exclusion[];
  /** What a reader must know about how the run came about. */
  readonly notes: readonly Caution[];

  /** A run from its facts and readings.
   *
   * @param input the run
   * @throws {TypeError} on a missing id or a value of the wrong type
   * @throws {RangeError} on times that run backwards, lengths that do not match, a temperature at or
   * below 0 K, a negative concentration, or two signals of one name
   * @throws {UnitError} on a unit that is unknown or does not fit */
  constructor(input: RunInput) {
    super();
    if (typeof input?.id !== "string" || input.id === "") {
      throw new TypeError(`Cannot make a run without an id: write { id: "1", times, signals }`);
    }
    const where = `run "${input.id}"`;
    this.id = input.id;
    this.temperature = readTemperature(input.temperature, where);
    this.initialConcentrations = readConcentrations(input.initialConcentrations ?? {}, where);
    this.properties = { ...input.properties };
    this.times = readTimes(input.times, where);
    this.signals = (input.signals ?? []).map((signal) =>
      "shownUnit" in signal
        ? sameLength(signal, this.times.length, where)
        : readSignal(signal, this.times.length, where)
    );
    const names = this.signals.map((signal) => signal.name);
    const twice = names.find((name, i) => names.indexOf(name) !== i);
    if (twice !== undefined) {
      throw new RangeError(`Cannot make ${where}: two signals are called "${twice}"; rename one`);
    }
    this.exclusions = readExclusions(input.exclusions ?? [], this.times.length, where);
    this.notes = [...input.notes ?? []];
  }

  /** The signal of this name, or the only one.
   *
   * @throws {RangeError} if there is none, or several and no name was given */
  signal(name?: string): Signal {
    const names = this.signals.map((signal) => `"${signal.name}"`).join(", ");
    if (name === undefined) {
      if (this.signals.length === 1) return this.signals[0];
      throw new RangeError(
        `Cannot choose a signal of run "${this.id}": there are ${
          names || "none"
        }; name one with the ` +
          `option "species"`,
      );
    }
    const found = this.signals.find((signal) => signal.name === name);
    if (found) return found;
    throw new RangeError(
      `Cannot find the signal "${name}" in run "${this.id}": there are ${names || "none"}`,
    );
  }

  /** Whether a reading is left out of fits. */
  isExcluded(index: number): boolean {
    return this.exclusions.some((exclusion) => exclusion.index === index);
  }

  /** A copy with some facts changed. */
  with(changes: Partial<RunInput>): Run {
    return new Run({
      id: this.id,
      temperature: this.temperature,
      initialConcentrations: this.initialConcentrations,
      properties: this.properties,
      times: this.times,
      signals: this.signals,
      exclusions: this.exclusions,
      notes: this.notes,
      ...changes,
    });
  }

  /** A copy in which readings are left out of fits; they stay listed with the reason.
   *
   * @param indices which readings @param reason why, in words
   * @throws {RangeError} if a reading does not exist or the reason is empty */
  without(indices: readonly number[], reason: string): Run {
    const added = indices.map((index) => ({ index, reason }));
    return this.with({ exclusions: [...this.exclusions, ...added] });
  }

  /** First line of every view. */
  override get title(): string {
    return `Run ${this.id}, ${this.times.length} readings`;
  }

  /** What the reader must know. */
  override get cautions(): readonly Caution[] {
    const shared = this.signals.flatMap((signal) => sharedCaution(this.id, signal) ?? []);
    if (this.exclusions.length === 0) return [...this.notes, ...shared];
    return [...this.notes, ...shared, {
      code: "readings-excluded",
      severity: "note",
      subject: this.id,
      message: `Left out of run "${this.id}": ` +
        this.exclusions.map((e) =>
          `reading ${e.index} at t = ${formatNumber(this.times[e.index], 4)} s (${e.reason})`
        ).join("; "),
    }];
  }

  /** The content, in reading order. */
  override sections(): Section[] {
    return runSections(this);
  }

  /** The run as plain data, every reading included. */
  override toJSON(): Record<string, unknown> {
    const readings = readingsTable(this, Array.from(this.times, (_, i) => i));
    return {
      ...super.toJSON(),
      readings: readings.rows.map((row) =>
        Object.fromEntries(readings.columns.map((column, i) => [column.key, cellJson(row[i])]))
      ),
    };
  }
}

function readTemperature(given: Quantity | undefined, where: string): number | undefined {
  if (given === undefined) return undefined;
  const kelvin = readQuantity(given, "K", `the temperature of ${where}`);
  if (kelvin > 0) return kelvin;
  throw new RangeError(
    `Cannot make ${where} at ${kelvin} K: write its temperature in K, or as text such as "25 °C"`,
  );
}

function readConcentrations(
  given: Readonly<Record<string, Quantity>>,
  where: string,
): Record<string, number> {
  return Object.fromEntries(
    Object.entries(given).map(([species, quantity]) => {
      const value = readQuantity(
        quantity,
        "mol/L",
        `the initial concentration of "${species}" in ${where}`,
      );
      if (value >= 0) return [species, value];
      throw new RangeError(
        `Cannot make ${where}: the initial concentration of "${species}" is ${value} mol/L`,
      );
    }),
  );
}

function readTimes(given: TimesInput, where: string): Float64Array {
  const [values, unit] = "unit" in given ? [given.values, given.unit] : [given, "s"];
  const [from, to] = [parseUnit(unit), parseUnit("s")];
  const times = Float64Array.from(values, (value) => convert(value, from, to));
  times.forEach((time, i) => {
    if (!Number.isFinite(time)) {
      throw new TypeError(`Cannot make ${where}: time ${i} is ${values[i]}; write a number`);
    }
    if (i > 0 && time < times[i - 1]) {
      throw new RangeError(
        `Cannot make ${where}: time runs backwards at reading ${i}, from ${values[i - 1]} to ` +
          `${values[i]} ${unit}; put the readings in order`,
      );
    }
  });
  return times;
}
