import type { Caution } from "../quantity/caution.ts";
import { formatNumber } from "../quantity/number_format.ts";
import type { Quantity } from "../quantity/read_quantity.ts";
import type { Run } from "./run.ts";

/** Facts of a run that a file may lack. */
export interface RunFacts {
  /** Temperature, K, or text with its unit. */
  temperature?: Quantity;
  /** Initial concentrations by species, mol/L, or text with their units. */
  initial?: Record<string, Quantity>;
}

/** Facts in canonical units. */
export interface KnownFacts {
  /** Temperature, K. */
  readonly temperature?: number;
  /** Initial concentrations by species, mol/L. */
  readonly initial?: Readonly<Record<string, number>>;
}

/** Facts for all runs, and for single ones by id, which win. */
export interface FactsByRun extends KnownFacts {
  /** Facts of single runs. */
  readonly runs?: Readonly<Record<string, KnownFacts>>;
}

/** A run with facts added; a note tells where one stands in place of what the file says.
 *
 * @param run as read from the file @param given facts for all runs and for single ones */
export function withFacts(run: Run, given: FactsByRun): { run: Run; notes: Caution[] } {
  const own = Object.hasOwn(given.runs ?? {}, run.id) ? given.runs![run.id] : {};
  const temperature = own.temperature ?? given.temperature;
  const initial = { ...given.initial, ...own.initial };
  const changes = [
    { fact: "temperature", before: run.temperature, now: temperature, unit: "K" },
    ...Object.entries(initial).map(([species, now]) => ({
      fact: `initial ${species}`,
      before: run.initialConcentrations[species],
      now,
      unit: "mol/L",
    })),
  ];
  const notes = changes.flatMap(({ fact, before, now, unit }): Caution[] =>
    before === undefined || now === undefined || before === now ? [] : [{
      code: "file-overruled",
      severity: "note",
      subject: run.id,
      message:
        `The ${fact} of run "${run.id}" is ${formatNumber(now, 6)} ${unit} by an option; its ` +
        `file says ${formatNumber(before, 6)} ${unit}`,
    }]
  );
  return {
    run: run.with({
      ...(temperature === undefined ? {} : { temperature }),
      initialConcentrations: { ...run.initialConcentrations, ...initial },
    }),
    notes,
  };
}
