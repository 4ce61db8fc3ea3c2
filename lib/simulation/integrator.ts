/** Why an integrator could not go on. */
export interface StepFailure {
  /** What happened, as words for a reader. */
  readonly what: string;
  /** Species in whose concentration the error was largest, in the kernel's numbering; −1 if none. */
  readonly species: number;
}

/** What an integrator counted. */
export interface IntegratorCounts {
  /** Steps taken. */
  accepted: number;
  /** Steps tried again with a smaller size. */
  rejected: number;
  /** Evaluations of dy/dt. */
  rightSides: number;
  /** Evaluations of the Jacobian. */
  jacobians: number;
  /** Factorizations. */
  factorizations: number;
  /** Linear systems solved. */
  solves: number;
}

/** A method that steps through time: {@link integrate} drives it and asks it for values between its
 * steps. */
export interface Integrator {
  /** Name of the method. */
  readonly name: string;
  /** Whether steps should end on outputs that stand alone, being the more exact there. */
  readonly endsOnOutputs: boolean;
  /** Time reached, s. */
  readonly t: number;
  /** Start of the last step, s. */
  readonly tBefore: number;
  /** Size that the next step would have, s. */
  readonly stepSize: number;
  /** State at the time reached. */
  readonly y: Float64Array;
  /** What was counted. */
  readonly counts: IntegratorCounts;
  /** Begins at a time and state, with a first step size; forgets what came before. */
  start(t: number, y: Float64Array, stepSize: number): void;
  /** Takes one step, exactly to `limit` where it would reach it; says why where it cannot. */
  advance(limit: number): StepFailure | undefined;
  /** State at a time within the last step, into an array. */
  interpolate(t: number, out: Float64Array): void;
}

/** Largest |error_i| / (atol_i + rtol max(|y_i|, |z_i|)); NaN where anything is no number. */
export function scaledError(
  error: Float64Array,
  y: Float64Array,
  z: Float64Array,
  rtol: number,
  atol: Float64Array,
): number {
  let largest = 0;
  for (let i = 0; i < error.length; i++) {
    const a = Math.abs(y[i]);
    const b = Math.abs(z[i]);
    const ratio = Math.abs(error[i]) / (atol[i] + rtol * (a > b ? a : b));
    if (!(ratio <= largest)) {
      if (!(ratio >= 0)) return NaN;
      largest = ratio;
    }
  }
  return largest;
}

/** The species with the largest scaled error, or one whose error is no number. */
export function worstSpecies(
  error: Float64Array,
  y: Float64Array,
  rtol: number,
  atol: Float64Array,
): number {
  let worst = -1;
  let largest = -1;
  for (let i = 0; i < error.length; i++) {
    const ratio = Math.abs(error[i]) / (atol[i] + rtol * Math.abs(y[i]));
    if (!(ratio >= 0)) return i;
    if (ratio > largest) {
      largest = ratio;
      worst = i;
    }
  }
  return worst;
}

/** Whether a step from t of size h is too small to be told from none. */
export function isCollapsed(t: number, h: number): boolean {
  return !(h > 4 * Number.EPSILON * Math.abs(t)) || h < 1e-300;
}
