import type { Mechanism } from "../mechanism/mechanism.ts";
import { eliminationOrder } from "./elimination_order.ts";
import { canCompile } from "./generated_code/compile.ts";
import { generateKernel } from "./generated_code/generate_kernel.ts";
import { InterpretedKernel } from "./interpreted_kernel.ts";
import { type JacobianStructure, jacobianStructure } from "./jacobian_structure.ts";
import type { Kernel } from "./kernel.ts";
import {
  networkOf,
  type ReactionNetwork,
  type ReactionOrigin,
  renumber,
} from "./reaction_network.ts";

/** Multiplications of one factorization above which the interpreted kernel is the faster one: longer
 * straight-line functions are optimised late or not at all (see test/bench/README.md). */
const MOST_GENERATED_PRODUCTS = 600;

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

  /** @param mechanism the steps */
  constructor(mechanism: Mechanism) {
    const { network, origins } = networkOf(mechanism);
    const order = eliminationOrder(network);
    this.place = new Int32Array(order.length);
    order.forEach((species, at) => this.place[species] = at);
    this.network = renumber(network, this.place);
    this.structure = jacobianStructure(this.network);
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

  /** Whether {@link makeKernel} generates code of itself. */
  get prefersGenerated(): boolean {
    const { size, reactions } = this.network;
    return this.products + size + reactions.length <= MOST_GENERATED_PRODUCTS && canCompile();
  }

  /** A kernel with arrays of its own.
   *
   * @param generated whether it is generated code; by default where that is the faster */
  makeKernel(generated: boolean = this.prefersGenerated): Kernel {
    if (!generated) return new InterpretedKernel(this.network, this.structure);
    this.#generate ??= generateKernel(this.network, this.structure);
    return this.#generate();
  }
}

const compiled = new WeakMap<Mechanism, CompiledNetwork>();

/** The compiled form of a mechanism, made at the first call and kept as long as the mechanism. */
export function compiledNetwork(mechanism: Mechanism): CompiledNetwork {
  let network = compiled.get(mechanism);
  if (!network) compiled.set(mechanism, network = new CompiledNetwork(mechanism));
  return network;
}
