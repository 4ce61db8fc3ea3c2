import { Estimate } from "../quantity/estimate.ts";
import * as option from "../quantity/options.ts";
import { estimate, type UncertainQuantity } from "./estimate_option.ts";
import { convertLinearly, speciesBehind } from "./linear_conversion.ts";
import type { Run } from "./run.ts";

/** What {@link absorbanceToConcentration} needs to know. */
export interface AbsorbanceOptions {
  /** Molar (decadic) absorption coefficient ε, L/(mol cm), or text with its unit. */
  molarAbsorptionCoefficient: UncertainQuantity;
  /** Path length l, cm, or text with its unit. */
  pathLength: UncertainQuantity;
  /** Absorbance without the species.
   * @default {0} */
  blank?: UncertainQuantity;
  /** The species that absorbs; the only one with a known initial concentration where left out. */
  species?: string;
  /** Name of the absorbance signal; needed where the run has several signals. */
  signal?: string;
}

const READERS = {
  molarAbsorptionCoefficient: estimate("L/(mol cm)", { above: 0 }),
  pathLength: estimate("cm", { above: 0 }),
  blank: estimate("1"),
  species: option.text,
  signal: option.text,
};

/** Concentration from absorbance by the Beer–Lambert law, c = (A − A_blank)/(ε l).
 *
 * Each reading keeps its own standard uncertainty u(A)/(ε l). The errors of ε, l and the blank are the
 * same for all readings and are kept apart, in `sharedUncertainties`.
 *
 * Source: IUPAC Green Book, 3rd ed. (2007), sec. 2.7, A = ε c l; propagation by JCGM 100:2008 (GUM), 5.1.2.
 *
 * @param run a run with a signal of absorbance
 * @param options absorption coefficient, path length, blank
 * @returns a copy of the run with the concentration, mol/L, in place of the absorbance
 * @throws {TypeError} on a missing option or one of the wrong type
 * @throws {RangeError} if the signal is no absorbance, or the species cannot be told
 * @throws {UnitError} on a unit that does not fit
 * @example
 * ```ts
 * import { strictEqual } from "node:assert";
 * import { absorbanceToConcentration, Run } from "ratebook";
 *
 * const run = new Run({
 *   id: "7",
 *   times: [0, 60],
 *   signals: [{ name: "A590", unit: "AU", values: [0.85, 0.45] }],
 * });
 * const converted = absorbanceToConcentration(run, {
 *   species: "dye",
 *   molarAbsorptionCoefficient: "8e4 L/(mol cm)",
 *   pathLength: "1 cm",
 *   blank: 0.05,
 * });
 * strictEqual(converted.signal("dye").values[0].toPrecision(10), "0.00001000000000");
 * ``` */
export function absorbanceToConcentration(run: Run, options: AbsorbanceOptions): Run {
  const read = option.readOptions("absorbanceToConcentration", options, READERS);
  const { molarAbsorptionCoefficient: coefficient, pathLength, blank = NO_BLANK } = read;
  if (!coefficient || !pathLength) {
    throw new TypeError(
      `Cannot convert absorbance without ${
        coefficient ? "the path length" : "the molar absorption coefficient"
      }: write { molarAbsorptionCoefficient: "8e4 L/(mol cm)", pathLength: "1 cm" }`,
    );
  }
  const signal = run.signal(read.signal);
  if (signal.unit !== "1" || signal.quantity === "fraction") {
    throw new RangeError(
      `Cannot take "${signal.name}" of run "${run.id}" for an absorbance: its unit is ` +
        `${signal.shownUnit}; an absorbance has AU, mAU or 1`,
    );
  }
  const scale = 1 / (coefficient.value * pathLength.value);
  return convertLinearly(run, signal, {
    species: speciesBehind(run, read.species, "absorbanceToConcentration"),
    zero: blank.value,
    scale,
    shared: [
      {
        from: "molar absorption coefficient",
        effect: (c) => -c * coefficient.relativeStandardError,
      },
      { from: "path length", effect: (c) => -c * pathLength.relativeStandardError },
      { from: "blank", effect: () => -scale * blank.standardError },
    ],
  });
}

const NO_BLANK = new Estimate({ value: 0, standardError: 0, unit: "1" });
