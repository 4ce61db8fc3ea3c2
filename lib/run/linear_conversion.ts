import type { Caution } from "../quantity/caution.ts";
import type { Run } from "./run.ts";
import type { Signal } from "./signal.ts";

/** How a signal S becomes a concentration: c = (S − zero)·scale. */
export interface LinearConversion {
  /** Name of the species whose concentration it is. */
  readonly species: string;
  /** Signal at which the concentration is 0, canonical unit. */
  readonly zero: number;
  /** Concentration for one unit of the signal, mol/L. */
  readonly scale: number;
  /** Errors that all readings share: what one standard deviation of the cause does to a concentration. */
  readonly shared: readonly {
    readonly from: string;
    readonly effect: (concentration: number) => number;
  }[];
  /** What a reader must know about the conversion. */
  readonly notes?: readonly Caution[];
}

/** A copy of a run in which one signal is replaced by the concentration it stands for.
 *
 * A reading's own standard uncertainty is that of the signal times |scale|; errors of the conversion are
 * kept apart, as they are the same for all readings. Negative concentrations stay. A limit of a censored
 * reading is converted where the concentration rises with the signal, and dropped where it falls, as it
 * would then be a lower one; the reading stays censored. */
export function convertLinearly(run: Run, signal: Signal, conversion: LinearConversion): Run {
  const { species, zero, scale, shared, notes = [] } = conversion;
  const values = signal.values.map((value) => (value - zero) * scale);
  const concentration: Signal = {
    name: species,
    quantity: "concentration",
    unit: "mol/L",
    shownUnit: "mol/L",
    values,
    standardUncertainties: signal.standardUncertainties?.map((u) => u * Math.abs(scale)),
    sharedUncertainties: shared
      .map(({ from, effect }) => ({ from, values: values.map(effect) }))
      .filter((cause) => cause.values.some((u) => u !== 0 && !Number.isNaN(u))),
    censored: signal.censored.map(({ index, text, limit }) =>
      limit === undefined || scale < 0
        ? { index, text }
        : { index, text, limit: (limit - zero) * scale }
    ),
  };
  return run.with({
    signals: run.signals.map((other) => other === signal ? concentration : other),
    notes: [...run.notes, ...notes],
  });
}

/** The species behind a raw signal: as given, or the only one whose initial concentration is known.
 *
 * @throws {RangeError} if it was not given and cannot be told */
export function speciesBehind(run: Run, given: string | undefined, owner: string): string {
  if (given !== undefined) return given;
  const known = Object.keys(run.initialConcentrations);
  if (known.length === 1) return known[0];
  throw new RangeError(
    `Cannot tell which species the signal of run "${run.id}" stands for: ${
      known.length === 0
        ? "no initial concentration is known"
        : `initial concentrations of ${known.join(", ")} are known`
    }; name it with the option "species" of ${owner}`,
  );
}
