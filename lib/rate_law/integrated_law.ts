/** Fraction f of the reactant that remains under −d[A]/dt = k[A]ⁿ, with κ = k[A]₀ⁿ⁻¹:
 * f = exp(−κt) for n = 1, else f = [1 + (n − 1)κt]^(1/(1−n)).
 *
 * For n < 1 the reactant is used up at t = 1/((1 − n)κ), and f is 0 from there on. The form through
 * log1p is smooth in n at n = 1.
 *
 * Source: integration of the rate law; K. J. Laidler, Chemical Kinetics, 3rd ed., Harper & Row 1987,
 * ch. 2.
 *
 * @param order n @param kappa κ, 1/s @param time t, s
 * @returns f; `Infinity` where a negative κ has made the law diverge */
export function remainingFraction(order: number, kappa: number, time: number): number {
  const turns = kappa * time;
  const x = (order - 1) * turns;
  if (x <= -1) return order < 1 ? 0 : Infinity;
  // ln(1 + x)/x → 1 − x/2 for x → 0.
  const ratio = Math.abs(x) < 1e-9 ? 1 - x / 2 : Math.log1p(x) / x;
  return Math.exp(-turns * ratio);
}

/** Time at which a fraction f of the reactant remains: t = (f^(1−n) − 1)/((n − 1)κ), −ln f/κ for n = 1.
 *
 * @param order n @param kappa κ = k[A]₀ⁿ⁻¹, 1/s @param fraction f, between 0 and 1
 * @returns time, s */
export function timeToFraction(order: number, kappa: number, fraction: number): number {
  const y = (1 - order) * Math.log(fraction);
  const ratio = Math.abs(y) < 1e-9 ? 1 + y / 2 : Math.expm1(y) / y;
  return -Math.log(fraction) * ratio / kappa;
}

/** Half-lives by which the reactant has fallen: −log₂ f. */
export function halfLivesFollowed(fraction: number): number {
  return fraction > 0 ? -Math.log2(fraction) : Infinity;
}
