import type { Caution } from "../quantity/caution.ts";
import { Result } from "../quantity/result.ts";
import type { Section } from "../quantity/section.ts";

/** All that a {@link StochasticTrajectory} is made from. */
export interface StochasticTrajectoryParts {
  /** Names of the species. */
  readonly species: readonly string[];
  /** Times reached, s. */
  readonly times: Float64Array;
  /** Copy numbers at each time, in the order of the species. */
  readonly rows: readonly Float64Array[];
  /** Reaction events. */
  readonly events: number;
  /** Steps of the method. */
  readonly steps: number;
  /** Whether all times were reached. */
  readonly finished: boolean;
  /** Why it ended. */
  readonly reason: string;
  /** Seed of the random numbers. */
  readonly seed: number;
  /** Method. */
  readonly method: string;
}

/** Copy numbers in time, one random course of events. */
export class StochasticTrajectory extends Result {
  /** Kind of result. */
  override readonly kind: string = "stochastic-trajectory";
  /** What the reader must know. */
  override readonly cautions: readonly Caution[];
  /** Seed of the random numbers. */
  override readonly seed: number;
  /** Times reached, s. */
  readonly times: Float64Array;
  /** Names of the species. */
  readonly species: readonly string[];
  /** Reaction events. */
  readonly events: number;
  /** Steps of the method; fewer than the events where many were taken at once. */
  readonly steps: number;
  /** Whether all times were reached. */
  readonly finished: boolean;
  /** Why it ended. */
  readonly reason: string;
  /** Method. */
  readonly method: string;
  readonly #rows: readonly Float64Array[];

  /** A course of events from its parts; `simulateStochastic` makes it.
   *
   * @param parts what was simulated */
  constructor(parts: StochasticTrajectoryParts) {
    super();
    this.species = parts.species;
    this.times = parts.times;
    this.events = parts.events;
    this.steps = parts.steps;
    this.finished = parts.finished;
    this.reason = parts.reason;
    this.seed = parts.seed;
    this.method = parts.method;
    this.#rows = parts.rows;
    this.cautions = parts.finished ? [] : [{
      code: "simulation-unfinished",
      severity: "serious",
      message: `The simulation is not finished: ${parts.reason}`,
    }];
  }

  /** First line of every view. */
  override get title(): string {
    const end = this.finished ? "" : ", UNFINISHED";
    return `Stochastic simulation, ${this.method}, seed ${this.seed}, ${this.events} events${end}`;
  }

  /** Copy numbers of a species at the times.
   *
   * @throws {RangeError} if there is no such species */
  count(species: string): Float64Array {
    const index = this.species.indexOf(species);
    if (index >= 0) return Float64Array.from(this.#rows, (row) => row[index]);
    throw new RangeError(
      `Cannot find the species "${species}": there are ${this.species.join(", ")}`,
    );
  }

  /** The content, in reading order. */
  override sections(): Section[] {
    return [{
      kind: "values",
      rows: [
        { key: "events", label: "events", value: this.events },
        { key: "steps", label: "steps", value: this.steps },
        { key: "reason", label: "ended because", value: this.reason },
      ],
    }, {
      kind: "table",
      key: "counts",
      columns: [
        { key: "time", label: "time / s" },
        ...this.species.map((name) => ({ key: name, label: name })),
      ],
      rows: Array.from(this.times, (time, i) => [time, ...this.#rows[i]]),
    }];
  }
}
