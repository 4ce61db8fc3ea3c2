/** Corrected Akaike information criterion of a least-squares fit with normal errors,
 * AICc = m ln(RSS/m) + 2K + 2K(K + 1)/(m − K − 1), K counting the error variance as a parameter.
 *
 * Source: N. Sugiura, Commun. Stat. A 7 (1978) 13; C. M. Hurvich & C.-L. Tsai, Biometrika 76 (1989)
 * 297.
 *
 * @param residualSumOfSquares weighted sum of squares
 * @param readings number of readings m
 * @param parameters number of fitted parameters, without the variance
 * @returns AICc, infinite where there are too few readings for the correction */
export function correctedAkaike(
  residualSumOfSquares: number,
  readings: number,
  parameters: number,
): number {
  const k = parameters + 1;
  if (readings - k - 1 <= 0) return Infinity;
  return readings * Math.log(residualSumOfSquares / readings) + 2 * k +
    2 * k * (k + 1) / (readings - k - 1);
}

/** Akaike weights: the relative likelihood of each model of a set, summing to 1.
 *
 * Source: H. Akaike, Biometrika 66 (1979) 237. */
export function akaikeWeights(criteria: readonly number[]): number[] {
  const best = Math.min(...criteria);
  const likelihoods = criteria.map((c) => Math.exp(-(c - best) / 2));
  const total = likelihoods.reduce((sum, value) => sum + value, 0);
  return likelihoods.map((value) => value / total);
}
