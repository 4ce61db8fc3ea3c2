import type { Mechanism } from "../../lib/mechanism/mechanism.ts";
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { simulate } from "../../lib/simulation/simulate.ts";
import type { Trajectory } from "../../lib/simulation/trajectory.ts";
import { randomNetwork } from "./random_network.ts";

/** A problem of the benchmark, with the solution it is measured against where there is one. */
export interface Problem {
  readonly name: string;
  readonly source: string;
  readonly species: readonly string[];
  readonly steps: readonly (readonly [string, number])[];
  readonly initial: Readonly<Record<string, number>>;
  readonly times: readonly number[];
  /** atol = rtol times this. */
  readonly atolFactor: number;
  readonly reference?: {
    readonly method: string;
    /** Value below which an error counts absolutely, per species. */
    readonly floor: readonly number[];
    readonly y: readonly (readonly number[])[];
    readonly sensitivities?: {
      readonly outputs: readonly number[];
      readonly floor: readonly number[];
      readonly values: readonly (readonly (readonly number[])[])[];
    };
  };
}

/** Problems in files beside their reference solutions. */
export const STORED = [
  "robertson",
  "e5",
  "orego",
  "hires",
  "ring10",
  "pollu",
  "chain50",
  "random100",
  "random300",
];

/** Problems made by a seeded generator. */
export const GENERATED = ["random1000", "random3000"];

/** A problem by name.
 *
 * @param peers folder of the native peers, for the reference solutions of the generated problems */
export function problem(name: string, peers?: string): Problem {
  if (STORED.includes(name)) {
    const url = new URL(`../reference/simulation/${name}.json`, import.meta.url);
    return JSON.parse(Deno.readTextFileSync(url));
  }
  const made = randomNetwork(Number(name.slice("random".length)));
  if (peers === undefined) return made;
  const solution = JSON.parse(Deno.readTextFileSync(`${peers}/reference/${name}.json`));
  return {
    ...made,
    reference: { method: solution.method, floor: solution.atolRef, y: solution.y },
  };
}

/** A problem's mechanism, and the concentrations at the start of the species that take part. */
export function prepare(
  problem: Problem,
): {
  mechanism: Mechanism;
  rateConstants: Record<string, number>;
  initial: Record<string, number>;
} {
  const mechanism = parseMechanism(problem.steps.map(([step]) => step).join("\n"));
  const taking = new Set(mechanism.species);
  return {
    mechanism,
    rateConstants: Object.fromEntries(problem.steps.map(([, k], i) => [`k${i + 1}`, k])),
    initial: Object.fromEntries(Object.entries(problem.initial).filter(([s]) => taking.has(s))),
  };
}

/** One integration of a prepared problem. */
export function solve(
  problem: Problem,
  prepared: ReturnType<typeof prepare>,
  rtol: number,
  method?: "rosenbrock" | "bdf",
): Trajectory {
  return simulate(prepared.mechanism, {
    rateConstants: prepared.rateConstants,
    initial: prepared.initial,
    times: problem.times,
    rtol,
    atol: rtol * problem.atolFactor,
    method,
    maxSteps: 1e6,
  });
}

/** Largest |y − reference| / (|reference| + floor) over species, at each output time. */
export function errorsAt(problem: Problem, trajectory: Trajectory): number[] {
  const { reference, species } = problem;
  if (!reference) return [];
  const taking = new Set(trajectory.mechanism.species);
  const worst = new Array<number>(problem.times.length).fill(0);
  species.forEach((name, i) => {
    if (!taking.has(name)) return;
    const values = trajectory.concentration(name);
    for (let at = 0; at < worst.length; at++) {
      const expected = reference.y[at][i];
      const difference = Math.abs(values[at] - expected);
      if (difference === 0) continue;
      const error = difference / (Math.abs(expected) + reference.floor[i]);
      if (!(error <= worst[at])) worst[at] = Number.isNaN(error) ? Infinity : error;
    }
  });
  return worst;
}

/** The largest error over the outputs that are compared: on e5, from 1e11 s on, native solvers' values
 * hang on a difference that rounding breaks, so the outputs before are taken for both sides. */
export function deliveredError(
  problem: Pick<Problem, "name" | "times">,
  errors: readonly number[],
): number {
  const counted = problem.name === "e5" ? errors.filter((_, i) => problem.times[i] <= 1e9) : errors;
  return counted.length === 0 ? NaN : Math.max(...counted);
}
