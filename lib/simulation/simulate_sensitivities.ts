import type { Mechanism } from "../mechanism/mechanism.ts";
import { readQuantity } from "../quantity/read_quantity.ts";
import { BackwardDifferentiation } from "./backward_differentiation.ts";
import type { CompiledNetwork } from "./compiled_network.ts";
import { type Parameter, SensitivityHistory } from "./sensitivity_history.ts";
import { type SimulateOptions, simulateWith } from "./simulate.ts";
import type { Trajectory } from "./trajectory.ts";

/** Part of the tolerance that the state is given, so that sensitivities, which have no part in the
 * choice of steps, keep about the tolerance asked for. */
const SHARE = 0.1;

/** Options of {@link simulateSensitivities}. */
export interface SensitivityOptions extends Omit<SimulateOptions, "method"> {
  /** Rate-constant symbols, and `[A]` for the concentration of A at the start. Every rate constant
   * by default. */
  readonly parameters?: readonly string[];
}

/** Concentrations in time with their derivatives by parameters. */
export class Sensitivities {
  /** The concentrations. */
  readonly trajectory: Trajectory;
  /** The parameters, in order. */
  readonly parameters: readonly string[];
  readonly #place: ArrayLike<number>;
  /** One array an output, all parameters behind one another. */
  readonly #values: readonly Float64Array[];
  readonly #sizes: readonly number[];

  /** Made by {@link simulateSensitivities}.
   *
   * @param trajectory the concentrations
   * @param parameters names
   * @param place where each species of the mechanism stands among the values of a parameter
   * @param values one array an output
   * @param sizes value of each parameter */
  constructor(
    trajectory: Trajectory,
    parameters: readonly string[],
    place: ArrayLike<number>,
    values: readonly Float64Array[],
    sizes: readonly number[],
  ) {
    this.trajectory = trajectory;
    this.parameters = parameters;
    this.#place = place;
    this.#values = values;
    this.#sizes = sizes;
  }

  /** ∂[species]/∂parameter at each output time of the trajectory.
   *
   * @throws {RangeError} if there is no such species or parameter */
  sensitivity(species: string, parameter: string): Float64Array {
    const { mechanism } = this.trajectory;
    const i = mechanism.species.indexOf(species);
    const q = this.parameters.indexOf(parameter);
    if (i < 0 || q < 0) {
      throw new RangeError(
        `Cannot give the sensitivity of "${species}" to "${parameter}": there is no such ` +
          `${i < 0 ? "species" : "parameter"} (there are: ` +
          `${(i < 0 ? mechanism.species : this.parameters).slice(0, 20).join(", ")})`,
      );
    }
    const at = q * this.#place.length + this.#place[i];
    return Float64Array.from(this.#values, (values) => values[at]);
  }

  /** ∂[species]/∂ln parameter at each output time, mol/L: the change that a relative change of the
   * parameter makes. */
  logarithmic(species: string, parameter: string): Float64Array {
    const size = this.#sizes[this.parameters.indexOf(parameter)];
    return this.sensitivity(species, parameter).map((value) => value * size);
  }
}

/** Concentrations of a mechanism's species in time, and their derivatives by rate constants and
 * concentrations at the start, in one integration: each parameter costs one linear system a step,
 * solved with the factors of the state.
 *
 * dS/dt = J S + ∂f/∂p, S = ∂y/∂p
 *
 * Source: see {@link SensitivityHistory}; R. P. Dickinson and R. J. Gelinas, J. Comput. Phys. 21
 * (1976) 123, for the equations.
 * @param mechanism the steps
 * @param options as of simulate, with the parameters to vary
 * @returns the trajectory and its sensitivities
 * @throws {TypeError} on a parameter that is neither a rate constant nor a species in brackets, or on
 * one that is no plain number
 * @example First-order decay: ∂[A]/∂k = −t [A]
 * ```ts
 * import { ok } from "node:assert";
 * import { mechanism, simulateSensitivities } from "ratebook";
 *
 * const decay = simulateSensitivities(mechanism`A ->[k] B`, {
 *   rateConstants: { k: 0.5 },
 *   initial: { A: 1 },
 *   times: [2],
 *   parameters: ["k", "[A]"],
 * });
 * ok(Math.abs(decay.sensitivity("A", "k")[0] + 2 * Math.exp(-1)) < 1e-5);
 * ok(Math.abs(decay.sensitivity("A", "[A]")[0] - Math.exp(-1)) < 1e-5);
 * ``` */
export function simulateSensitivities(
  mechanism: Mechanism,
  options: SensitivityOptions,
): Sensitivities {
  const { parameters: names = mechanism.rateConstants, ...rest } = options;
  const values: Float64Array[] = [];
  let place: ArrayLike<number> = [];
  let integrator: BackwardDifferentiation | undefined;
  const sizes: number[] = [];
  const trajectory = simulateWith(mechanism, rest, {
    integrator(compiled, kernel, coefficients, rtol, atol) {
      place = compiled.place;
      const parameters = names.map((name) => {
        const { parameter, size } = readParameter(mechanism, compiled, name, options);
        sizes.push(size);
        return parameter;
      });
      const sensitivities = new SensitivityHistory(
        kernel,
        compiled.network.reactions,
        parameters,
      );
      const share = Math.max(SHARE, Math.min(1, 2e-14 / rtol));
      integrator = new BackwardDifferentiation(
        kernel,
        coefficients,
        rtol * share,
        atol.map((tolerance) => tolerance * share),
        sensitivities,
      );
      return integrator;
    },
    output(time) {
      const at = new Float64Array(names.length * mechanism.species.length);
      integrator!.interpolateSensitivities(time, at);
      values.push(at);
    },
  });
  return new Sensitivities(trajectory, names, place, values, sizes);
}

function readParameter(
  mechanism: Mechanism,
  compiled: CompiledNetwork,
  name: string,
  options: SensitivityOptions,
): { parameter: Parameter; size: number } {
  const bracketed = /^\[(.+)\]$/.exec(name);
  const species = bracketed ? mechanism.species.indexOf(bracketed[1]) : -1;
  if (species >= 0) {
    return {
      parameter: { reactions: [], factors: new Float64Array(0), species: compiled.place[species] },
      size: readQuantity(options.initial[bracketed![1]] ?? 0, "mol/L", `the start of ${name}`),
    };
  }
  const symbol = mechanism.rateConstants.indexOf(name);
  if (symbol < 0) {
    throw new TypeError(
      `Cannot take the sensitivity to "${name}": expected a rate constant (` +
        `${mechanism.rateConstants.slice(0, 20).join(", ")}) or a species in brackets such as ` +
        `"[${mechanism.species[0]}]"`,
    );
  }
  const value: unknown = options.rateConstants[name];
  if (typeof value !== "number") {
    throw new TypeError(
      `Cannot take the sensitivity to "${name}": its value is an expression, not a number; give it ` +
        `as a number, or leave it out of parameters`,
    );
  }
  const thirdBody = readQuantity(options.initial.M ?? 1, "mol/L", "the third body M");
  const reactions: number[] = [];
  const factors: number[] = [];
  compiled.origins.forEach((origin, j) => {
    if (origin.rateConstant !== symbol) return;
    reactions.push(j);
    factors.push(mechanism.steps[origin.step].thirdBody ? thirdBody : 1);
  });
  return {
    parameter: { reactions, factors: Float64Array.from(factors), species: -1 },
    size: value,
  };
}
