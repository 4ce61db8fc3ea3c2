import { type ElementaryStep, formatStep } from "./elementary_step.ts";

/** A list of elementary steps, as read by {@link parseMechanism}. */
export class Mechanism {
  /** The steps, in the order written. */
  readonly steps: readonly ElementaryStep[];
  /** Every species once, in the order first named; the third body M and light are none. */
  readonly species: readonly string[];
  /** Every rate-constant symbol once, in the order first used, forward before reverse. */
  readonly rateConstants: readonly string[];

  /** A mechanism of these steps.
   *
   * @param steps the steps, in order */
  constructor(steps: readonly ElementaryStep[]) {
    const species = new Set<string>();
    const symbols = new Set<string>();
    for (const step of steps) {
      for (const participant of step.reactants) species.add(participant.species);
      for (const participant of step.products) species.add(participant.species);
      symbols.add(step.rateConstant);
      if (step.reverseRateConstant !== undefined) symbols.add(step.reverseRateConstant);
    }
    this.steps = steps;
    this.species = [...species];
    this.rateConstants = [...symbols];
  }

  /** The mechanism in its notation, one step a line, every symbol written; parses to the same steps. */
  toString(): string {
    return this.steps.map(formatStep).join("\n");
  }

  /** The mechanism as data: its notation. */
  toJSON(): { kind: "mechanism"; notation: string } {
    return { kind: "mechanism", notation: this.toString() };
  }

  /** What `console.log` prints. */
  [Symbol.for("Deno.customInspect")](): string {
    return this.toString();
  }
}
