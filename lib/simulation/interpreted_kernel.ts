import type { ClosingSum } from "./closing_sums.ts";
import type { JacobianStructure } from "./jacobian_structure.ts";
import type { Kernel } from "./kernel.ts";
import { changesBySpecies, type ReactionNetwork } from "./reaction_network.ts";
import { SparseFactors } from "./sparse_factors.ts";

/** Right side and Jacobian made elsewhere, as by generated code. */
export interface Evaluation {
  /** f(y) into `dydt`. */
  rightSide(y: Float64Array, k: Float64Array, dydt: Float64Array): void;
  /** Entries of J at y, in the order of the structure. */
  jacobian(y: Float64Array, k: Float64Array, entries: Float64Array): void;
}

/** A kernel that walks flat tables: the path for large networks, and the twin that generated code is
 * held against. */
export class InterpretedKernel implements Kernel {
  readonly size: number;
  readonly reactionCount: number;
  readonly generated: boolean;
  readonly generatedFactors = false;
  readonly sums: readonly ClosingSum[];
  readonly #structure: JacobianStructure;
  readonly #factors: SparseFactors;
  readonly #jacobian: Float64Array;
  /** Three reactant places a reaction; an absent one points at the constant 1 behind the species. */
  readonly #reactants: Int32Array;
  /** The other reactants of each partial derivative, two places each. */
  readonly #others: Int32Array;
  /** The reactions that change species i, and by how much, are at changeStart[i] … changeStart[i + 1] − 1:
   * sums by species take two thirds of the time that adding each rate where it belongs takes. */
  readonly #changeStart: Int32Array;
  readonly #changing: Int32Array;
  readonly #change: Float64Array;
  readonly #rates: Float64Array;
  readonly #padded: Float64Array;
  readonly #slope: Float64Array;
  readonly #evaluation: Evaluation | undefined;

  /** @param network species numbered in elimination order
   * @param structure its symbolic factorization
   * @param evaluation right side and Jacobian in place of its own */
  constructor(network: ReactionNetwork, structure: JacobianStructure, evaluation?: Evaluation) {
    this.#evaluation = evaluation;
    this.generated = evaluation !== undefined;
    const n = network.size;
    const m = network.reactions.length;
    this.size = n;
    this.reactionCount = m;
    this.sums = structure.sums;
    this.#structure = structure;
    this.#factors = new SparseFactors(structure);
    this.#jacobian = new Float64Array(structure.jacobianColumn.length);
    this.#padded = new Float64Array(n + 1).fill(1);
    this.#slope = new Float64Array(n);
    this.#reactants = new Int32Array(3 * m).fill(n);
    this.#rates = new Float64Array(m);
    network.reactions.forEach(({ reactants }, j) => this.#reactants.set(reactants, 3 * j));
    const bySpecies = changesBySpecies(network);
    this.#changeStart = new Int32Array(n + 1);
    bySpecies.forEach((list, i) => this.#changeStart[i + 1] = this.#changeStart[i] + list.length);
    this.#changing = Int32Array.from(bySpecies.flatMap((list) => list.map(([, j]) => j)));
    this.#change = Float64Array.from(bySpecies.flatMap((list) => list.map(([factor]) => factor)));
    const partials = structure.partialReaction.length;
    this.#others = new Int32Array(2 * partials).fill(n);
    for (let p = 0; p < partials; p++) {
      const others = [...network.reactions[structure.partialReaction[p]].reactants];
      others.splice(others.indexOf(structure.partialSpecies[p]), 1);
      this.#others.set(others, 2 * p);
    }
  }

  rates(y: Float64Array, k: Float64Array, rates: Float64Array): void {
    const padded = this.#padded;
    const reactants = this.#reactants;
    const n = this.size;
    for (let i = 0; i < n; i++) padded[i] = y[i];
    for (let j = 0, a = 0; j < this.reactionCount; j++, a += 3) {
      rates[j] = k[j] * padded[reactants[a]] * padded[reactants[a + 1]] * padded[reactants[a + 2]];
    }
  }

  rightSide(y: Float64Array, k: Float64Array, dydt: Float64Array): void {
    if (this.#evaluation !== undefined) {
      this.#evaluation.rightSide(y, k, dydt);
      return;
    }
    const rates = this.#rates;
    const start = this.#changeStart;
    const changing = this.#changing;
    const change = this.#change;
    this.rates(y, k, rates);
    let q = 0;
    for (let i = 0; i < this.size; i++) {
      let sum = 0;
      for (const end = start[i + 1]; q < end; q++) sum += change[q] * rates[changing[q]];
      dydt[i] = sum;
    }
  }

  linearize(y: Float64Array, k: Float64Array): void {
    if (this.#evaluation !== undefined) {
      this.#evaluation.jacobian(y, k, this.#jacobian);
      return;
    }
    const { partialReaction, partialOrder, targetStart, target, targetFactor } = this.#structure;
    const padded = this.#padded;
    const others = this.#others;
    const jacobian = this.#jacobian;
    for (let i = 0; i < this.size; i++) padded[i] = y[i];
    jacobian.fill(0);
    let q = 0;
    for (let p = 0, o = 0; p < partialReaction.length; p++, o += 2) {
      const partial = partialOrder[p] * k[partialReaction[p]] * padded[others[o]] *
        padded[others[o + 1]];
      for (const end = targetStart[p + 1]; q < end; q++) {
        jacobian[target[q]] += targetFactor[q] * partial;
      }
    }
  }

  timesJacobian(vector: Float64Array, product: Float64Array): void {
    const { jacobianStart, jacobianColumn } = this.#structure;
    const jacobian = this.#jacobian;
    let q = 0;
    for (let i = 0; i < this.size; i++) {
      let sum = 0;
      for (const end = jacobianStart[i + 1]; q < end; q++) {
        sum += jacobian[q] * vector[jacobianColumn[q]];
      }
      product[i] = sum;
    }
  }

  factor(d: number): boolean {
    return this.#factors.factor(d, this.#jacobian);
  }

  solve(x: Float64Array): void {
    this.#factors.solve(x);
  }

  solveStage(u: Float64Array, k: Float64Array, x: Float64Array): void {
    const slope = this.#slope;
    this.rightSide(u, k, slope);
    for (let i = 0; i < this.size; i++) x[i] = slope[i] + x[i];
    this.#factors.solveChange(x);
  }

  /** Entries of J of the last {@link linearize}, dense and row-major, for tests. */
  denseJacobian(): Float64Array {
    const { jacobianStart, jacobianColumn } = this.#structure;
    const dense = new Float64Array(this.size * this.size);
    for (let i = 0; i < this.size; i++) {
      for (let q = jacobianStart[i]; q < jacobianStart[i + 1]; q++) {
        dense[i * this.size + jacobianColumn[q]] = this.#jacobian[q];
      }
    }
    return dense;
  }
}
