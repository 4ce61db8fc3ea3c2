import type { Mechanism } from "../mechanism/mechanism.ts";
import { canClose, type ClosingSum, closingSums, renumberSums } from "./closing_sums.ts";
import { eliminationOrder } from "./elimination_order.ts";
import { canCompile } from "./generated_code/compile.ts";
import { generateKernel } from "./generated_code/generate_kernel.ts";
import { generateEvaluation } from "./generated_code/generate_evaluation.ts";
import { type Evaluation, InterpretedKernel } from "./interpreted_kernel.ts";
import { type JacobianStructure, jacobianStructure } from "./jacobian_structure.ts";
import type { Kernel } from "./kernel.ts";
import {
  networkOf,
  type ReactionNetwork,
  type ReactionOrigin,
  renumber,
} from "./reaction_network.ts";

/** Multiplications of one factorization above which factors in tables are the faster ones: longer
 * straight-line functions are optimised late or not at all (see test/bench/README.md). */
const MOST_GENERATED_PRODUCTS = 600;

/** Reactions above which code for the rates and their derivatives, in pieces, no longer pays: it takes
 * too long to be optimised. */
const MOST_GENERATED_REACTIONS = 1500;

/** A mechanism made ready for integration, once: its network in elimination order, the symbolic
 * factorization, and its code. */
export class CompiledNetwork {
  /** Reactions, species numbered in elimination order. */
  readonly network: ReactionNetwork;
  /** Pattern of the Jacobian and its factors. */
  readonly structure: JacobianStructure;
  /** Where each reaction comes from. */
  readonly origins: readonly ReactionOrigin[];
  /** Kernel's number of each species of the mechanism. */
  readonly place: Int32Array;
  /** Multiplications and subtractions of one factorization. */
  readonly products: number;
  #generate: (() => Kernel) | undefined;
  #evaluate: (() => Evaluation) | undefined;

  /** @param mechanism the steps
   * @param closing whether conserved sums make their closing species */
  constructor(mechanism: Mechanism, closing = false) {
    const { network, origins } = networkOf(mechanism);
    const sums = closing ? closingSums(network) : [];
    const order = eliminationOrder(network, sums);
    this.place = new Int32Array(order.length);
    order.forEach((species, at) => this.place[species] = at);
    this.network = renumber(network, this.place);
    this.structure = jacobianStructure(this.network, renumberSums(sums, this.place));
    this.origins = origins;
    const { rowStart, column, diagonal } = this.structure;
    let products = 0;
    for (let i = 0; i < network.size; i++) {
      for (let p = rowStart[i]; p < diagonal[i]; p++) {
        products += rowStart[column[p] + 1] - diagonal[column[p]];
      }
    }
    this.products = products;
  }

  /** What {@link makeKernel} generates of itself: straight-line code for all of the kernel, for the rates
   * and their derivatives, or none. */
  get preferred(): "all" | "rates" | "none" {
    const { size, reactions } = this.network;
    if (reactions.length > MOST_GENERATED_REACTIONS || !canCompile()) return "none";
    return this.products + size + reactions.length <= MOST_GENERATED_PRODUCTS ? "all" : "rates";
  }

  /** A kernel with arrays of its own.
   *
   * @param generated what is generated code; by default what is fastest */
  makeKernel(generated: "all" | "rates" | "none" = this.preferred): Kernel {
    const { network, structure } = this;
    if (generated === "none") return new InterpretedKernel(network, structure);
    if (generated === "rates") {
      this.#evaluate ??= generateEvaluation(network, structure);
      return new InterpretedKernel(network, structure, this.#evaluate());
    }
    this.#generate ??= generateKernel(network, structure);
    return this.#generate();
  }
}

const compiled = new WeakMap<Mechanism, CompiledNetwork>();
const compiledClosing = new WeakMap<Mechanism, CompiledNetwork>();
const sumsOf = new WeakMap<Mechanism, readonly ClosingSum[]>();

/** The compiled form of a mechanism, made at the first call and kept as long as the mechanism. */
export function compiledNetwork(mechanism: Mechanism): CompiledNetwork {
  return kept(compiled, mechanism, () => new CompiledNetwork(mechanism));
}

/** Most species for which conserved sums are looked for: beyond, finding them takes too long. */
const MOST_CLOSING_SPECIES = 60;

/** The compiled form for given concentrations at the start: where they allow it, conserved sums make
 * their closing species. */
export function compiledFor(
  mechanism: Mechanism,
  initial: Readonly<Record<string, number>>,
): CompiledNetwork {
  if (mechanism.species.length > MOST_CLOSING_SPECIES) return compiledNetwork(mechanism);
  const sums = kept(sumsOf, mechanism, () => closingSums(networkOf(mechanism).network));
  const y = Float64Array.from(mechanism.species, (name) => initial[name] ?? 0);
  return sums.length === 0 || !canClose(sums, y)
    ? compiledNetwork(mechanism)
    : kept(compiledClosing, mechanism, () => new CompiledNetwork(mechanism, true));
}

function kept<T>(store: WeakMap<Mechanism, T>, mechanism: Mechanism, make: () => T): T {
  let value = store.get(mechanism);
  if (value === undefined) store.set(mechanism, value = make());
  return value;
}
