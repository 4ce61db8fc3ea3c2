import type { Mechanism } from "../mechanism/mechanism.ts";
import { canClose, type ClosingSum, closingSums, renumberSums } from "./closing_sums.ts";
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
