import { GAS_CONSTANT } from "../quantity/constants.ts";
import { Estimate } from "../quantity/estimate.ts";
import * as option from "../quantity/options.ts";
import { estimate, type UncertainQuantity } from "./estimate_option.ts";
import { convertLinearly } from "./linear_conversion.ts";
import type { Run } from "./run.ts";
import type { Signal } from "./signal.ts";

/** What {@link pressureToConcentration} needs to know. */
export interface PressureOptions {
  /** The species whose concentration is wanted. */
  reactant: string;
  /** Stoichiometric numbers of the gases, negative for reactants: `{ A: -1, B: 1, C: 1 }`. */
  stoichiometry: Readonly<Record<string, number>>;
  /** Temperature, K, or text with its unit; that of the run where left out. */
  temperature?: UncertainQuantity;
  /** Total pressure at the start, Pa, or text with its unit; the reading at t = 0 where left out. */
  initialPressure?: UncertainQuantity;
  /** Partial pressure of the reactant at the start, Pa, or text with its unit; the total pressure at the
   * start where left out and the reactant is the only one. */
  reactantPressure?: UncertainQuantity;
  /** Name of the pressure signal; needed where the run has several signals. */
  signal?: string;
}

const READERS = {
  reactant: option.text,
  stoichiometry: option.record(option.number()),
  temperature: estimate("K", { above: 0 }),
  initialPressure: estimate("Pa", { above: 0 }),
  reactantPressure: estimate("Pa", { above: 0 }),
  signal: option.text,
};

/** Concentration of a gaseous reactant from the total pressure p of a reaction at constant volume and
 * temperature, [A] = {p_A(0) + ν_A (p − p(0))/Σν}/(R T), with stoichiometric numbers ν negative for
 * reactants.
 *
 * For A → n gases this is p = p(0)[1 + (n − 1) x] at the conversion x. The gases are taken as ideal, which
 * the result says. Each reading keeps its own standard uncertainty; the errors of the temperature and of the
 * pressures at the start are the same for all readings and are kept apart, in `sharedUncertainties`. Where
 * p(0) is a reading with an uncertainty, that reading's error is counted in all values.
 *
 * Source: ideal gas law with the extent of reaction, ξ = (p − p(0)) V/(R T Σν); IUPAC Green Book, 3rd ed.
 * (2007), sec. 2.10.
 *
 * @param run a run with a signal of total pressure
 * @param options reactant, stoichiometry, pressures at the start
 * @returns a copy of the run with the concentration, mol/L, in place of the pressure
 * @throws {TypeError} on a missing option or one of the wrong type
 * @throws {RangeError} if the pressure does not change with the reaction (Σν = 0), the reactant is not used
 * up, the temperature or a pressure at the start is not known, or the signal is no pressure
 * @example
 * ```ts
 * import { ok } from "node:assert";
 * import { pressureToConcentration, Run } from "ratebook";
 *
 * const run = new Run({
 *   id: "7",
 *   temperature: "320 °C",
 *   times: [0, 100],
 *   signals: [{ name: "pressure", unit: "kPa", values: [40, 70] }],
 * });
 * const converted = pressureToConcentration(run, {
 *   reactant: "A",
 *   stoichiometry: { A: -1, B: 1, C: 1 },
 * });
 * const [start, later] = converted.signal("A").values;
 * ok(Math.abs(later / start - 0.25) < 1e-12); // (2 × 40 − 70)/40
 * ``` */
export function pressureToConcentration(run: Run, options: PressureOptions): Run {
  const read = option.readOptions("pressureToConcentration", options, READERS);
  const { reactant, stoichiometry } = read;
  if (reactant === undefined || stoichiometry === undefined) {
    throw new TypeError(
      `Cannot convert pressure without ${
        reactant === undefined ? "the reactant" : "the stoichiometry"
      }: write { reactant: "A", stoichiometry: { A: -1, B: 1, C: 1 } }`,
    );
  }
  const { ofReactant, sum } = stoichiometricNumbers(reactant, stoichiometry);
  const signal = run.signal(read.signal);
  if (signal.unit !== "Pa") {
    throw new RangeError(
      `Cannot take "${signal.name}" of run "${run.id}" for a pressure: its unit is ` +
        `${signal.shownUnit}`,
    );
  }
  const temperature = read.temperature ?? temperatureOf(run);
  const start = read.initialPressure ?? startPressure(run, signal);
  const sole = Object.values(stoichiometry).filter((number) => number < 0).length === 1;
  if (!sole && !read.reactantPressure) {
    throw new RangeError(
      `Cannot tell how much "${reactant}" run "${run.id}" began with: there are several reactants; give ` +
        `its partial pressure at the start as "reactantPressure"`,
    );
  }
  const partial = read.reactantPressure ?? start;
  if (partial.value > start.value * (1 + 1e-9)) {
    throw new RangeError(
      `Cannot begin run "${run.id}" with a partial pressure of ${partial.value} Pa in a total of ` +
        `${start.value} Pa`,
    );
  }
  // c/(mol/L) = 10⁻³ p/(R T) with p in Pa.
  const perPascal = 1e-3 / (GAS_CONSTANT * temperature.value);
  const scale = perPascal * ofReactant / sum;
  const startEffect = read.reactantPressure ? -scale : perPascal - scale;
  return convertLinearly(run, signal, {
    species: reactant,
    zero: start.value - partial.value * sum / ofReactant,
    scale,
    shared: [
      { from: "temperature", effect: (c) => -c * temperature.relativeStandardError },
      { from: "pressure at the start", effect: () => startEffect * start.standardError },
      ...(read.reactantPressure
        ? [{
          from: "partial pressure at the start",
          effect: () => perPascal * partial.standardError,
        }]
        : []),
    ],
    notes: [{
      code: "ideal-gas",
      severity: "note",
      subject: run.id,
      message: `"${reactant}" in run "${run.id}" is from the total pressure, for ideal gases at ` +
        `constant volume and temperature and this one reaction`,
    }],
  });
}

function stoichiometricNumbers(
  reactant: string,
  stoichiometry: Readonly<Record<string, number>>,
): { ofReactant: number; sum: number } {
  const ofReactant = Object.hasOwn(stoichiometry, reactant) ? stoichiometry[reactant] : 0;
  if (!(ofReactant < 0)) {
    throw new RangeError(
      `Cannot follow "${reactant}" by pressure: its stoichiometric number is ${ofReactant}; write a ` +
        `negative one for a reactant, { ${reactant}: -1, … }`,
    );
  }
  const sum = Object.values(stoichiometry).reduce((total, number) => total + number, 0);
  if (Math.abs(sum) < 1e-12) {
    throw new RangeError(
      `Cannot follow "${reactant}" by pressure: the number of gas molecules does not change (Σν = 0)`,
    );
  }
  return { ofReactant, sum };
}

function temperatureOf(run: Run): Estimate {
  if (run.temperature !== undefined) {
    return new Estimate({ value: run.temperature, standardError: 0, unit: "K" });
  }
  throw new RangeError(
    `Cannot convert the pressure of run "${run.id}": its temperature is not known; give the option ` +
      `"temperature"`,
  );
}

/** The reading at t = 0 with its uncertainty. */
function startPressure(run: Run, signal: Signal): Estimate {
  const index = run.times.findIndex((time, i) =>
    time === 0 && Number.isFinite(signal.values[i]) && !run.isExcluded(i)
  );
  if (index < 0) {
    throw new RangeError(
      `Cannot tell the pressure at the start of run "${run.id}": it has no reading at t = 0; give the ` +
        `option "initialPressure"`,
    );
  }
  return new Estimate({
    value: signal.values[index],
    standardError: signal.standardUncertainties?.[index] ?? 0,
    unit: "Pa",
  });
}
