import { parseMechanism } from "../mechanism/parse_mechanism.ts";
import * as option from "../quantity/options.ts";
import { simulate } from "../simulation/simulate.ts";
import { simulateStochastic } from "../simulation/simulate_stochastic.ts";
import type { StochasticTrajectory } from "../simulation/stochastic_trajectory.ts";
import type { Trajectory } from "../simulation/trajectory.ts";

/** The TOML parser; no literal in the import, so that it is not looked at before a file is read. */
const PARSER: string = "smol-toml";

/** Most output times of a file. */
const MOST_TIMES = 1_000_000;

/** Simulates what a TOML file describes: `mechanism`, `[rate_constants]`, `[times]`, and either
 * `[initial_concentrations]` or, for single events, `[initial_copy_numbers]`.
 *
 * @param text the file's text @param name its name, for messages
 * @throws {SyntaxError} if it is no TOML, its mechanism cannot be read, a key does not exist or a value has the
 * wrong type
 * @throws {RangeError} on a value out of range */
export async function simulateFile(
  text: string,
  name: string,
): Promise<Trajectory | StochasticTrajectory> {
  const { parse }: { parse: (text: string) => unknown } = await import(PARSER);
  let raw: unknown;
  try {
    raw = parse(text);
  } catch (error) {
    throw new SyntaxError(`Cannot read ${name} as TOML: ${(error as Error).message}`);
  }
  try {
    return simulateDescription(raw, name);
  } catch (error) {
    // Here a value of the wrong type is a fault of the file.
    if (
      error instanceof TypeError && /^Cannot (use|simulate|read the options)/.test(error.message)
    ) {
      throw new SyntaxError(error.message);
    }
    throw error;
  }
}

function simulateDescription(raw: unknown, name: string): Trajectory | StochasticTrajectory {
  const read = option.readOptions(name, raw, {
    mechanism: option.text,
    rate_constants: option.record(option.number({ min: 0 })),
    initial_concentrations: option.record(option.quantity("mol/L", { atLeast: 0 })),
    initial_copy_numbers: option.record(option.integer(0)),
    volume: option.quantity("L", { above: 0 }),
    times: readTimes,
    relative_tolerance: option.number({ min: 1e-14, max: 0.1 }),
    absolute_tolerance: option.quantity("mol/L", { above: 0 }),
    method: option.text,
    seed: option.integer(-(2 ** 31)),
  });
  for (const key of ["mechanism", "rate_constants", "times"] as const) {
    if (read[key] === undefined) {
      throw new SyntaxError(`Cannot simulate ${name}: the key "${key}" is missing`);
    }
  }
  const mechanism = parseMechanism(read.mechanism!);
  const common = { rateConstants: read.rate_constants!, times: read.times! };
  if (read.initial_copy_numbers) {
    // deno-lint-ignore no-explicit-any
    const method = read.method as any;
    return simulateStochastic(mechanism, {
      ...common,
      initial: read.initial_copy_numbers,
      ...given({ volume: read.volume, seed: read.seed, method }),
    });
  }
  return simulate(mechanism, {
    ...common,
    initial: read.initial_concentrations ?? {},
    ...given({ rtol: read.relative_tolerance, atol: read.absolute_tolerance }),
    // deno-lint-ignore no-explicit-any
    ...given({ method: read.method as any }),
  });
}

/** Entries that have a value. */
function given<T extends Record<string, unknown>>(entries: T): { [K in keyof T]?: T[K] } {
  return Object.fromEntries(
    Object.entries(entries).filter(([, value]) => value !== undefined),
  ) as { [K in keyof T]?: T[K] };
}

/** `times`: a list, or `until` with `count` and `spacing`. */
function readTimes(value: unknown, name: string): number[] {
  if (Array.isArray(value)) return option.list(option.quantity("s"))(value, name);
  const read = option.readOptions(name, value, {
    from: option.quantity("s", { atLeast: 0 }),
    until: option.quantity("s", { above: 0 }),
    count: option.integer(2),
    spacing: option.oneOf("linear", "logarithmic"),
  });
  const { until, count = 101, spacing = "linear" } = read;
  if (until === undefined) throw new SyntaxError(`Cannot read ${name}: "until" is missing`);
  if (count > MOST_TIMES) throw new RangeError(`Cannot give ${count} times: at most ${MOST_TIMES}`);
  if (spacing === "logarithmic") {
    const from = read.from ?? until * 1e-6;
    if (!(from > 0 && from < until)) {
      throw new RangeError(`Cannot space times logarithmically from ${from} s to ${until} s`);
    }
    const times = Array.from(
      { length: count },
      (_, i) => from * (until / from) ** (i / (count - 1)),
    );
    times[count - 1] = until;
    return times;
  }
  const from = read.from ?? 0;
  return Array.from({ length: count }, (_, i) => from + (until - from) * i / (count - 1));
}
