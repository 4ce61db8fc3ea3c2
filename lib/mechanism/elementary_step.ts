/** A species on one side of a step, with its stoichiometric number. */
export interface Participant {
  /** Name as written. */
  readonly species: string;
  /** Stoichiometric number, a whole number of 1 or more. */
  readonly coefficient: number;
}

/** An elementary step: what reacts, what forms, and the symbols of its rate constants.
 *
 * v = k ∏ [reactant]^ν, times [M] where a third body takes part; d[i]/dt = (ν_products − ν_reactants) v.
 *
 * Source: IUPAC, Glossary of terms used in physical organic chemistry, Pure Appl. Chem. 66 (1994)
 * 1077, "elementary reaction", "rate of reaction". */
export interface ElementaryStep {
  /** Place in the mechanism, from 1. */
  readonly number: number;
  /** Line of the text it was read from, from 1. */
  readonly line: number;
  /** Species that react, each once, in the order written; empty for a constant source. */
  readonly reactants: readonly Participant[];
  /** Species that form, each once, in the order written; empty for a loss. */
  readonly products: readonly Participant[];
  /** Symbol of the forward rate constant. */
  readonly rateConstant: string;
  /** Symbol of the reverse rate constant; undefined for a step that runs one way. */
  readonly reverseRateConstant: string | undefined;
  /** Whether a third body M takes part on both sides. */
  readonly thirdBody: boolean;
  /** Whether light is taken up (`hν` on the left), given off (on the right), or neither. */
  readonly light: "absorbed" | "emitted" | undefined;
}

/** Number of particles that react in the forward direction: reactants with their numbers, the third
 * body counted, light not. */
export function molecularity(step: ElementaryStep): number {
  let count = step.thirdBody ? 1 : 0;
  for (const { coefficient } of step.reactants) count += coefficient;
  return count;
}

/** A step in the notation of {@link parseMechanism}. */
export function formatStep(step: ElementaryStep): string {
  const left = side(step.reactants, step.thirdBody, step.light === "absorbed");
  const right = side(step.products, step.thirdBody, step.light === "emitted");
  const arrow = step.reverseRateConstant === undefined
    ? `->[${step.rateConstant}]`
    : `<=>[${step.rateConstant}][${step.reverseRateConstant}]`;
  return `${left} ${arrow} ${right}`;
}

function side(participants: readonly Participant[], thirdBody: boolean, light: boolean): string {
  const terms = participants.map(({ species, coefficient }) =>
    coefficient === 1 ? species : `${coefficient} ${species}`
  );
  if (thirdBody) terms.push("M");
  if (light) terms.push("hν");
  return terms.length === 0 ? "∅" : terms.join(" + ");
}
