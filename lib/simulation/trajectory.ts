import type { Caution } from "../quantity/caution.ts";
import { Result } from "../quantity/result.ts";
import type { Section } from "../quantity/section.ts";
import type { Mechanism } from "../mechanism/mechanism.ts";
import { formatStep } from "../mechanism/elementary_step.ts";
import type { CompiledNetwork } from "./compiled_network.ts";
import { conservedSums } from "./conserved_quantities.ts";
import type { IntegratorCounts } from "./integrator.ts";
import type { RateCoefficients } from "./rate_coefficients.ts";

/** What an integration took. */
export interface SimulationStatistics extends Readonly<IntegratorCounts> {
  /** Method of integration. */
  readonly method: string;
  /** Whether it ran as generated code. */
  readonly generatedCode: boolean;
}

/** A sum of concentrations that no step changes, and how well the numbers kept it. */
export interface ConservedQuantity {
  /** Weight of each species in it. */
  readonly weights: Readonly<Record<string, number>>;
  /** The sum in words, such as `[A] + 2 [B]`. */
  readonly text: string;
  /** Its value at the start, mol/L. */
  readonly initial: number;
  /** Largest |change| of it at any output, over the sum of |weight × concentration| there. */
  readonly drift: number;
}

/** What a {@link Trajectory} is made from. */
export interface TrajectoryParts {
  /** The steps. */
  readonly mechanism: Mechanism;
  /** Their compiled form. */
  readonly compiled: CompiledNetwork;
  /** Output times reached, s. */
  readonly times: Float64Array;
  /** One row of concentrations an output time, kernel's numbering. */
  readonly states: readonly Float64Array[];
  /** Concentrations at the start, kernel's numbering. */
  readonly initial: Float64Array;
  /** Rate coefficients of the reactions. */
  readonly rateCoefficients: RateCoefficients;
  /** What the integration took. */
  readonly statistics: SimulationStatistics;
  /** Whether every output time was reached. */
  readonly finished: boolean;
  /** Why it ended. */
  readonly reason: string;
  /** Time reached, s. */
  readonly timeReached: number;
}

/** Most rows of the concentration table in a view. */
const MOST_ROWS = 12;
/** Most species in a view. */
const MOST_SPECIES = 8;

/** Concentrations of every species at the output times that were reached. */
export class Trajectory extends Result {
  /** Kind of result. */
  override readonly kind: string = "trajectory";
  /** The steps that were followed. */
  readonly mechanism: Mechanism;
  /** Output times reached, s. */
  readonly times: Float64Array;
  /** Whether every output time was reached. */
  readonly finished: boolean;
  /** Why the integration ended, with what to try where it did not finish. */
  readonly reason: string;
  /** Time reached, s. */
  readonly timeReached: number;
  /** What the integration took. */
  readonly statistics: SimulationStatistics;
  /** What the reader must know: that the integration did not finish. */
  override readonly cautions: readonly Caution[];
  readonly #parts: TrajectoryParts;
  #conserved: readonly ConservedQuantity[] | undefined;

  /** A trajectory from its parts; `simulate` makes it.
   *
   * @internal
   * @param parts what the integration left */
  constructor(parts: TrajectoryParts) {
    super();
    this.#parts = parts;
    this.mechanism = parts.mechanism;
    this.times = parts.times;
    this.finished = parts.finished;
    this.reason = parts.reason;
    this.timeReached = parts.timeReached;
    this.statistics = parts.statistics;
    this.cautions = parts.finished
      ? []
      : [{ code: "unfinished", severity: "serious", message: parts.reason }];
  }

  /** Concentration of a species at each of {@link times}, mol/L.
   *
   * @param species its name as in the mechanism
   * @throws {RangeError} if the mechanism has no such species */
  concentration(species: string): Float64Array {
    const index = this.mechanism.species.indexOf(species);
    if (index < 0) {
      throw new RangeError(
        `Cannot give the concentration of "${species}": the mechanism has no such species ` +
          `(there are: ${this.mechanism.species.slice(0, 20).join(", ")})`,
      );
    }
    const place = this.#parts.compiled.place[index];
    return Float64Array.from(this.#parts.states, (state) => state[place]);
  }

  /** Rate of a step at each of {@link times}, forward less reverse, mol/(L s).
   *
   * @param step number of the step, from 1
   * @throws {RangeError} if the mechanism has no such step */
  stepRates(step: number): Float64Array {
    if (this.mechanism.steps[step - 1] === undefined) {
      throw new RangeError(
        `Cannot give the rate of step ${step}: the mechanism has steps 1 to ` +
          `${this.mechanism.steps.length}`,
      );
    }
    const { compiled, rateCoefficients, states } = this.#parts;
    return Float64Array.from(states, (state, at) => {
      rateCoefficients.at?.(this.times[at]);
      return compiled.origins.reduce((sum, origin, j) => {
        if (origin.step !== step - 1) return sum;
        let rate = rateCoefficients.k[j];
        for (const i of compiled.network.reactions[j].reactants) rate *= state[i];
        return sum + (origin.reverse ? -rate : rate);
      }, 0);
    });
  }

  /** Sums of concentrations that no step changes, each with its drift. */
  get conservedQuantities(): readonly ConservedQuantity[] {
    this.#conserved ??= this.#conservedQuantities();
    return this.#conserved;
  }

  #conservedQuantities(): ConservedQuantity[] {
    const { compiled, mechanism, states, initial } = this.#parts;
    const names: string[] = [];
    mechanism.species.forEach((name, i) => names[compiled.place[i]] = name);
    return conservedSums(compiled.network).map(({ species, weights }) => {
      const total = (state: Float64Array) =>
        species.reduce((sum, i, q) => sum + weights[q] * state[i], 0);
      const start = total(initial);
      let drift = 0;
      for (const state of states) {
        const size = species.reduce((sum, i, q) => sum + Math.abs(weights[q] * state[i]), 0);
        const change = Math.abs(total(state) - start);
        if (change > 0) drift = Math.max(drift, change / Math.max(size, Math.abs(start)));
      }
      const terms = species.map((i, q) => {
        const size = Math.abs(weights[q]);
        const term = `${size === 1 ? "" : `${size} `}[${names[i]}]`;
        return q === 0
          ? (weights[q] < 0 ? `−${term}` : term)
          : `${weights[q] < 0 ? "−" : "+"} ${term}`;
      });
      return {
        weights: Object.fromEntries(species.map((i, q) => [names[i], weights[q]])),
        text: terms.join(" "),
        initial: start,
        drift,
      };
    });
  }

  /** First line of every view. */
  override get title(): string {
    const { species, steps } = this.mechanism;
    return `${
      this.finished ? "Trajectory" : "UNFINISHED trajectory"
    }: ${species.length} species, ` +
      `${steps.length} steps, to ${Number(this.timeReached.toPrecision(4))} s`;
  }

  /** Keys of the headline values. */
  protected override headlineKeys(): readonly string[] {
    return ["finished", "timeReached"];
  }

  /** The content, in reading order. */
  override sections(): readonly Section[] {
    const { method, generatedCode, accepted, rejected, jacobians, factorizations } =
      this.statistics;
    const shown = this.mechanism.species.slice(0, MOST_SPECIES);
    const series = shown.map((name) => this.concentration(name));
    const count = this.times.length;
    const rows = Array.from(
      { length: Math.min(count, MOST_ROWS) },
      (_, r) => count <= MOST_ROWS ? r : Math.round(r * (count - 1) / (MOST_ROWS - 1)),
    );
    return [
      {
        kind: "statement",
        key: "mechanism",
        text: this.mechanism.steps.slice(0, 20).map(formatStep).join("\n"),
      },
      {
        kind: "values",
        rows: [
          { key: "finished", label: "Finished", value: this.finished ? "yes" : "no" },
          { key: "reason", label: "Ended", value: this.reason },
          { key: "timeReached", label: "Time reached", value: this.timeReached, unit: "s" },
          { key: "method", label: "Method", value: method },
          { key: "generatedCode", label: "Generated code", value: generatedCode ? "yes" : "no" },
          { key: "accepted", label: "Steps taken", value: accepted },
          { key: "rejected", label: "Steps rejected", value: rejected },
          { key: "jacobians", label: "Jacobians", value: jacobians },
          { key: "factorizations", label: "Factorizations", value: factorizations },
        ],
      },
      ...(this.mechanism.species.length > 400 ? [] : [{
        kind: "table" as const,
        key: "conservedQuantities",
        title: "Conserved quantities",
        columns: [
          { key: "sum", label: "Sum" },
          { key: "initial", label: "At the start (mol/L)" },
          { key: "drift", label: "Largest relative drift" },
        ],
        rows: this.conservedQuantities.map((q) => [q.text, q.initial, q.drift]),
      }]),
      {
        kind: "table",
        key: "concentrations",
        title: "Concentrations (mol/L)",
        columns: [{ key: "time", label: "t (s)" }, ...shown.map((s) => ({ key: s, label: s }))],
        rows: rows.map((at) => [this.times[at], ...series.map((values) => values[at])]),
      },
    ];
  }
}
