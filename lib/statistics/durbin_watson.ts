/** Durbin–Watson statistic Σ(eᵢ − eᵢ₋₁)²/Σeᵢ²: about 2 for residuals independent of their
 * neighbours, towards 0 where they hang together.
 *
 * Source: J. Durbin & G. S. Watson, Biometrika 37 (1950) 409.
 *
 * @param residuals residuals in the order of time
 * @returns the statistic, `NaN` for residuals that are all zero */
export function durbinWatson(residuals: ArrayLike<number>): number {
  let differences = 0;
  let squares = 0;
  for (let i = 0; i < residuals.length; i++) {
    squares += residuals[i] ** 2;
    if (i > 0) differences += (residuals[i] - residuals[i - 1]) ** 2;
  }
  return squares === 0 ? NaN : differences / squares;
}
