import type { ClosingSum } from "./closing_sums.ts";

/** The numbers of a network, as an integrator asks for them: f = dy/dt, the Jacobian J = ∂f/∂y, and
 * systems with I/(hγ) − J. Species are numbered in the kernel's own order. Nothing is allocated after
 * the kernel is made; a kernel holds one Jacobian and one factorization. */
export interface Kernel {
  /** Number of species. */
  readonly size: number;
  /** Number of reactions. */
  readonly reactionCount: number;
  /** Whether it runs as generated code, at least its rates and their derivatives. */
  readonly generated: boolean;
  /** Whether its factors are generated code as well. */
  readonly generatedFactors: boolean;
  /** Rates of the reactions v = k ∏ y into `rates`. */
  rates(y: Float64Array, k: Float64Array, rates: Float64Array): void;
  /** f(y) into `dydt`; linear in k, so that k̇ in place of k gives ∂f/∂t. */
  rightSide(y: Float64Array, k: Float64Array, dydt: Float64Array): void;
  /** Evaluates J at y and keeps it. */
  linearize(y: Float64Array, k: Float64Array): void;
  /** J of the last {@link linearize} times a vector. */
  timesJacobian(vector: Float64Array, product: Float64Array): void;
  /** Factors d I − J with the J of the last {@link linearize}; false where a pivot is 0 or not finite. */
  factor(d: number): boolean;
  /** Solves (d I − J) x = b with the last factors, b in `x` on entry. */
  solve(x: Float64Array): void;
  /** Conserved sums that make their closing species. */
  readonly sums: readonly ClosingSum[];
  /** Solves (d I − J) x = f(u) + b with the last factors, b in `x` on entry: one stage. The conserved
   * sums of b must be 0, as they are where b is made of changes of the state. */
  solveStage(u: Float64Array, k: Float64Array, x: Float64Array): void;
}
