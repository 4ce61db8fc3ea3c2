import {
  callable,
  instance,
  integer,
  list,
  number,
  oneOf,
  quantity,
  readOptions,
  record,
} from "../quantity/options.ts";
import type { Quantity } from "../quantity/read_quantity.ts";
import { Mechanism } from "../mechanism/mechanism.ts";
import { compiledFor, type CompiledNetwork } from "./compiled_network.ts";
import type { Integrator } from "./integrator.ts";
import type { Kernel } from "./kernel.ts";
import { firstStep } from "./first_step.ts";
import { integrateInParts, type IntegrationEnd } from "./integrate.ts";
import { chooseIntegrator, type MethodName } from "./choose_integrator.ts";
import { initialState, rateFunctionsOf } from "./initial_conditions.ts";
import { followTemperature, type RateCoefficients } from "./rate_coefficients.ts";
import { dependsOnTemperature, type RateExpression } from "./rate_expression.ts";
import {
  type TemperatureProgramme,
  temperatureProgramme,
  type TemperatureTable,
} from "./temperature_programme.ts";
import { Trajectory } from "./trajectory.ts";

/** Options of {@link simulate}. */
export interface SimulateOptions {
  /** Each rate-constant symbol: its value, in mol/L and s, or how it depends on temperature (Arrhenius,
   * Eyring), on [M] (fall-off) or on another one (reverse constant from K). */
  readonly rateConstants: Readonly<Record<string, RateExpression>>;
  /** Temperature, K or text with its unit, or a table of temperatures in time; needed where a rate constant
   * depends on it. */
  readonly temperature?: Quantity | TemperatureTable;
  /** Concentration of each species at the start, mol/L or text with its unit; 0 where not named.
   * `M` is the third body where steps have one. */
  readonly initial: Readonly<Record<string, number | string>>;
  /** Output times, ascending, s or text with its unit; the start is at `startTime`. */
  readonly times: ArrayLike<number | string>;
  /** Time at which `initial` holds, s; 0 by default. */
  readonly startTime?: number | string;
  /** Relative tolerance, 1e-6 by default. */
  readonly rtol?: number;
  /** Absolute tolerance, mol/L: one, or one for each species named; by default rtol times 1e-10
   * times the largest concentration at the start. */
  readonly atol?: number | Readonly<Record<string, number>>;
  /** Method; by default chosen from the size of the mechanism and the tolerance. */
  readonly method?: MethodName;
  /** Most steps, 100 000 by default. */
  readonly maxSteps?: number;
  /** Stops the integration when aborted. */
  readonly signal?: AbortSignal;
  /** Called now and then with the time reached, s, and the steps taken. */
  readonly progress?: (time: number, steps: number) => void;
}

/** Concentrations of a mechanism's species in time, in a closed batch at constant temperature and
 * volume.
 *
 * d[i]/dt = Σ_j ν_ij v_j, v_j = k_j ∏ [reactant]^ν
 *
 * Source: methods as in {@link Rosenbrock} and {@link BackwardDifferentiation}.
 * @param mechanism the steps
 * @param options rate constants, concentrations at the start, output times, tolerances
 * @returns a trajectory; one that could not be finished says so, why, and what to try
 * @throws {TypeError} on an option that does not exist or a rate constant that is missing
 * @throws {RangeError} on a value out of range
 * @example A → B → C
 * ```ts
 * import { ok } from "node:assert";
 * import { mechanism, simulate } from "ratebook";
 *
 * const consecutive = mechanism`
 *   A -> B
 *   B -> C
 * `;
 * const trajectory = simulate(consecutive, {
 *   rateConstants: { k1: 2, k2: 1 },
 *   initial: { A: 1 },
 *   times: [0, 1, 2],
 * });
 * const exact = 2 * (Math.exp(-1) - Math.exp(-2));
 * ok(Math.abs(trajectory.concentration("B")[1] - exact) < 1e-5);
 * ``` */
export function simulate(mechanism: Mechanism, options: SimulateOptions): Trajectory {
  return simulateWith(mechanism, options, undefined);
}

/** What is followed along with the concentrations. */
export interface Companion {
  /** Makes the integrator. */
  integrator(
    compiled: CompiledNetwork,
    kernel: Kernel,
    coefficients: RateCoefficients,
    rtol: number,
    atol: Float64Array,
  ): Integrator;
  /** Called after each output with its time, s. */
  output(time: number): void;
}

/** As {@link simulate}, with an integrator of the caller's that follows more than concentrations. */
export function simulateWith(
  mechanism: Mechanism,
  options: SimulateOptions,
  companion: Companion | undefined,
): Trajectory {
  if (!(mechanism instanceof Mechanism)) {
    throw new TypeError(
      `Cannot simulate ${String(mechanism)}: expected a mechanism, as from parseMechanism`,
    );
  }
  const given = readOptions("simulate", options, READERS);
  const compiled = compiledFor(mechanism, given.initial ?? {});
  const startTime = given.startTime ?? 0;
  const times = outputTimes(given.times, startTime);
  const rtol = given.rtol ?? 1e-6;
  const programme = readTemperature(given.temperature, given.rateConstants);
  const functions = rateFunctionsOf(mechanism, compiled, given.rateConstants, given.initial);
  const coefficients = followTemperature(functions, programme, startTime);
  const initial = initialState(mechanism, compiled, given.initial);
  const atol = absoluteTolerances(mechanism, compiled.place, given.atol, rtol, initial);
  const kernel = compiled.makeKernel();
  const integrator = companion?.integrator(compiled, kernel, coefficients, rtol, atol) ??
    chooseIntegrator(given.method, kernel, coefficients, rtol, atol);
  const stepAt = (time: number, y: Float64Array): number => {
    const reach = times.find((t) => t > time);
    if (reach === undefined) return 0;
    coefficients.at?.(time);
    return firstStep(kernel, y, coefficients.k, reach - time, rtol);
  };
  integrator.start(startTime, initial, stepAt(startTime, initial));
  const states: Float64Array[] = [];
  const end = integrateInParts(integrator, programme.bends, stepAt, {
    times,
    output: (index, y) => {
      states.push(y.slice());
      companion?.output(times[index]);
    },
    maxSteps: given.maxSteps ?? 100_000,
    signal: given.signal,
    progress: given.progress,
  });
  const names: string[] = [];
  mechanism.species.forEach((name, i) => names[compiled.place[i]] = name);
  return new Trajectory({
    mechanism,
    compiled,
    times: times.slice(0, end.outputs),
    states,
    initial,
    rateCoefficients: coefficients,
    statistics: {
      method: integrator.name,
      generatedCode: kernel.generated,
      ...integrator.counts,
    },
    finished: end.finished,
    reason: reasonOf(end, integrator.t, integrator.y, names, initial, integrator.counts.accepted),
    timeReached: integrator.t,
  });
}

/** The temperature in time; any where no rate constant asks for it. */
function readTemperature(
  given: Quantity | TemperatureTable | undefined,
  rateConstants: Readonly<Record<string, RateExpression>> | undefined,
): TemperatureProgramme {
  if (given !== undefined) return temperatureProgramme(given);
  const symbol = Object.entries(rateConstants ?? {}).find(([, k]) => dependsOnTemperature(k))?.[0];
  if (symbol === undefined) return temperatureProgramme(STANDARD_TEMPERATURE);
  throw new TypeError(
    `Cannot evaluate the rate constant "${symbol}" without a temperature: add temperature, such as "25 °C"`,
  );
}

/** Stands where nothing depends on temperature, K. */
const STANDARD_TEMPERATURE = 298.15;

const positive = { min: Number.MIN_VALUE };

const READERS = {
  rateConstants: record((value, name): RateExpression =>
    typeof value === "object" && value !== null
      ? value as RateExpression
      : number({ min: 0 })(value, name)
  ),
  temperature: (value: unknown): Quantity | TemperatureTable =>
    value as Quantity | TemperatureTable,
  initial: record(quantity("mol/L", { atLeast: 0 })),
  times: list(quantity("s")),
  startTime: quantity("s"),
  rtol: number({ min: 1e-14, max: 0.1 }),
  atol: (value: unknown, name: string): number | Record<string, number> =>
    typeof value === "number"
      ? number(positive)(value, name)
      : record(number(positive))(value, name),
  method: oneOf<MethodName>("rosenbrock", "bdf"),
  maxSteps: integer(1),
  signal: instance(AbortSignal),
  progress: callable<(time: number, steps: number) => void>,
};

function outputTimes(times: number[] | undefined, startTime: number): Float64Array {
  if (times === undefined || times.length === 0) {
    throw new TypeError(
      `Cannot simulate without output times: add times, in s, such as times: [0, 10, 20]`,
    );
  }
  for (let i = 0; i < times.length; i++) {
    const least = i === 0 ? startTime : times[i - 1];
    if (!(times[i] >= least)) {
      throw new RangeError(
        `Cannot use ${times[i]} s as output time ${
          i + 1
        }: expected ${least} s or later, as times ` +
          `ascend from startTime (${startTime} s)`,
      );
    }
  }
  return Float64Array.from(times);
}

function absoluteTolerances(
  mechanism: Mechanism,
  place: Int32Array,
  given: number | Record<string, number> | undefined,
  rtol: number,
  initial: Float64Array,
): Float64Array {
  const largest = initial.reduce((most, y) => Math.max(most, y), 0);
  const usual = rtol * 1e-10 * (largest || 1);
  const atol = new Float64Array(initial.length).fill(typeof given === "number" ? given : usual);
  if (typeof given === "object") {
    for (const [species, value] of Object.entries(given)) {
      const index = mechanism.species.indexOf(species);
      if (index < 0) {
        throw new TypeError(
          `Cannot use the tolerance of "${species}": the mechanism has no such species (there are: ` +
            `${mechanism.species.slice(0, 20).join(", ")})`,
        );
      }
      atol[place[index]] = value;
    }
  }
  return atol;
}

function reasonOf(
  end: IntegrationEnd,
  t: number,
  y: Float64Array,
  names: readonly string[],
  initial: Float64Array,
  steps: number,
): string {
  const at = Number(t.toPrecision(6));
  if (end.finished) return "every output time was reached";
  if (end.what === "aborted") return `Cannot integrate past t = ${at} s: aborted by the signal`;
  if (end.what === "steps") {
    return `Cannot integrate past t = ${at} s: ${steps} steps are used up; raise maxSteps, or use ` +
      `a larger rtol or atol`;
  }
  const name = names[end.species];
  const largest = initial.reduce((most, c) => Math.max(most, c), 0);
  const value = Math.abs(y[end.species]);
  if (value > 1e4 * largest && largest > 0) {
    return `Cannot integrate past t = ${at} s: ${end.detail}, and [${name}] has grown to ` +
      `${
        value.toPrecision(3)
      } mol/L; a step that makes more of its own reactant has no bound, so ` +
      `add the step that ends it`;
  }
  return `Cannot integrate past t = ${at} s: ${end.detail}, the error being largest in [${name}]; ` +
    `look for a rate constant of the wrong magnitude in its steps, or use a larger rtol or atol`;
}
