import { closest, distance } from "fastest-levenshtein";
import type { Mechanism } from "../mechanism/mechanism.ts";
import type { CompiledNetwork } from "./compiled_network.ts";
import { type RateExpression, type RateFunction, rateFunctionOf } from "./rate_expression.ts";

/** Rate coefficient of each reaction as a function of temperature; that of a step with a third body is k [M]. */
export function rateFunctionsOf(
  mechanism: Mechanism,
  compiled: CompiledNetwork,
  rateConstants: Readonly<Record<string, RateExpression>> | undefined,
  initial: Readonly<Record<string, number>> | undefined,
): ((temperature: number) => number)[] {
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
  const functions = rateFunctions(mechanism.rateConstants, given);
  return compiled.origins.map(({ rateConstant, step }) => {
    const k = functions.get(mechanism.rateConstants[rateConstant])!;
    return mechanism.steps[step].thirdBody
      ? (temperature) => k(temperature, thirdBody) * thirdBody!
      : (temperature) => k(temperature, thirdBody);
  });
}

/** The function of each symbol; a reverse constant may name a forward one that is itself no reverse. */
function rateFunctions(
  symbols: readonly string[],
  given: Readonly<Record<string, RateExpression>>,
): Map<string, RateFunction> {
  return new Map(symbols.map((symbol) => {
    const forward = (name: string): RateFunction => {
      const expression = given[name];
      if (expression === undefined) throw unknownName("rate constant", name, symbols);
      return rateFunctionOf(expression);
    };
    return [symbol, rateFunctionOf(given[symbol], forward)];
  }));
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
    if (species === "M" && (thirdBody || !index.has("M"))) continue;
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
