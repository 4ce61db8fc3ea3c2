import { closest, distance } from "fastest-levenshtein";
import type { Mechanism } from "../mechanism/mechanism.ts";
import type { CompiledNetwork } from "./compiled_network.ts";

/** Rate coefficient of each reaction; that of a step with a third body is k [M]. */
export function rateCoefficientsOf(
  mechanism: Mechanism,
  compiled: CompiledNetwork,
  rateConstants: Readonly<Record<string, number>> | undefined,
  initial: Readonly<Record<string, number>> | undefined,
): Float64Array {
  const given = rateConstants ?? {};
  const symbols = new Set(mechanism.rateConstants);
  for (const symbol of Object.keys(given)) {
    if (!symbols.has(symbol)) {
      throw unknownName("rate constant", symbol, mechanism.rateConstants);
    }
  }
  const missing = mechanism.rateConstants.filter((symbol) => !Object.hasOwn(given, symbol));
  if (missing.length > 0) {
    throw new TypeError(
      `Cannot simulate without the rate constants ${list(missing)}: add them to rateConstants`,
    );
  }
  const thirdBody = initial?.M;
  if (thirdBody === undefined && mechanism.steps.some((step) => step.thirdBody)) {
    throw new TypeError(
      `Cannot simulate steps with a third body M without its concentration: add M to initial`,
    );
  }
  return Float64Array.from(compiled.origins, ({ rateConstant, step }) => {
    const k = given[mechanism.rateConstants[rateConstant]];
    return mechanism.steps[step].thirdBody ? k * thirdBody! : k;
  });
}

/** Concentrations at the start, in the kernel's numbering. */
export function initialState(
  mechanism: Mechanism,
  compiled: CompiledNetwork,
  initial: Readonly<Record<string, number>> | undefined,
): Float64Array {
  const state = new Float64Array(mechanism.species.length);
  const index = new Map(mechanism.species.map((name, i) => [name, i]));
  const thirdBody = mechanism.steps.some((step) => step.thirdBody);
  for (const [species, value] of Object.entries(initial ?? {})) {
    if (species === "M" && thirdBody) continue;
    const i = index.get(species);
    if (i === undefined) throw unknownName("species", species, mechanism.species);
    state[compiled.place[i]] = value;
  }
  return state;
}

function unknownName(what: string, name: string, names: readonly string[]): TypeError {
  const near = names.length > 0 ? closest(name, [...names]) : "";
  const meant = near && distance(name, near) <= Math.max(1, near.length / 2)
    ? `; did you mean "${near}"?`
    : "";
  return new TypeError(
    `Cannot use the ${what} "${name}": the mechanism has none of that name${meant} (there are: ` +
      `${list(names)})`,
  );
}

function list(names: readonly string[]): string {
  const shown = names.slice(0, 20).map((name) => `"${name}"`).join(", ");
  return names.length > 20 ? `${shown} and ${names.length - 20} more` : shown;
}
