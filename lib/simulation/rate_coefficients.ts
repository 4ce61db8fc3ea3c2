/** Rate coefficients of a network's reactions, constant or changing in time. */
export interface RateCoefficients {
  /** Their values, at the time last asked for where they change. */
  readonly k: Float64Array;
  /** Sets `k` for time t, s; absent where they are constant. */
  at?(t: number): void;
  /** Sets `kdot` = dk/dt for time t, s; goes with `at`. */
  derivative?(t: number, kdot: Float64Array): void;
}
