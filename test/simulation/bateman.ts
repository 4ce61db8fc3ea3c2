/** Amount of a member of a first-order chain that starts from 1 of its first member, when the rate
 * constants are distinct.
 *
 * N_m = Σ_{i≤m} (∏_{j<m} k_j) / ∏_{j≤m, j≠i} (k_j − k_i) exp(−k_i t)
 *
 * Source: H. Bateman, Proc. Cambridge Philos. Soc. 15 (1910) 423.
 *
 * @param k rate constant of each member, 1/s
 * @param member from 0
 * @param t time, s */
export function bateman(k: readonly number[], member: number, t: number): number {
  return amplitudes(k, member).reduce((sum, a, i) => sum + a * Math.exp(-k[i] * t), 0);
}

/** How far rounding may carry {@link bateman}: its terms cancel while the member is scarce. */
export function batemanRounding(k: readonly number[], member: number): number {
  return 4 * Number.EPSILON * amplitudes(k, member).reduce((sum, a) => sum + Math.abs(a), 0);
}

function amplitudes(k: readonly number[], member: number): number[] {
  const taking = k.slice(0, member + 1);
  const before = taking.slice(0, member).reduce((product, kj) => product * kj, 1);
  return taking.map((ki, i) =>
    taking.reduce((quotient, kj, j) => i === j ? quotient : quotient / (kj - ki), before)
  );
}
