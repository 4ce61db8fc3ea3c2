/** Outcome of the runs test on the signs of residuals. */
export interface RunsTest {
  /** Number of unbroken stretches of one sign. */
  readonly runs: number;
  /** Residuals above zero. */
  readonly above: number;
  /** Residuals below zero; zeros are left out. */
  readonly below: number;
  /** Probability of so few stretches (or fewer) if signs come in random order. */
  readonly probability: number;
}

/** Wald–Wolfowitz runs test on signs, exact one-sided probability of too few runs, i.e. of residuals
 * that hang together as a missing curve makes them.
 *
 * Source: A. Wald & J. Wolfowitz, Ann. Math. Stat. 11 (1940) 147.
 *
 * @param residuals residuals in the order of time */
export function runsTest(residuals: ArrayLike<number>): RunsTest {
  const signs = Array.from(residuals).filter((r) => r !== 0).map((r) => r > 0);
  const above = signs.filter(Boolean).length;
  const below = signs.length - above;
  const runs = signs.reduce(
    (count, sign, i) => count + (i === 0 || sign !== signs[i - 1] ? 1 : 0),
    0,
  );
  if (above === 0 || below === 0) {
    // All on one side: the least probable order of that many signs if each is a fair coin.
    return { runs, above, below, probability: signs.length > 0 ? 2 ** (1 - signs.length) : 1 };
  }
  const total = logChoose(above + below, above);
  let probability = 0;
  for (let r = 2; r <= runs; r++) {
    const half = Math.floor(r / 2);
    const ways = r % 2 === 0
      ? 2 * Math.exp(logChoose(above - 1, half - 1) + logChoose(below - 1, half - 1) - total)
      : Math.exp(logChoose(above - 1, half) + logChoose(below - 1, half - 1) - total) +
        Math.exp(logChoose(above - 1, half - 1) + logChoose(below - 1, half) - total);
    probability += ways;
  }
  return { runs, above, below, probability: Math.min(probability, 1) };
}

/** ln of the binomial coefficient; −∞ where it is zero. */
function logChoose(n: number, k: number): number {
  if (k < 0 || k > n) return -Infinity;
  let sum = 0;
  for (let i = 1; i <= k; i++) sum += Math.log((n - k + i) / i);
  return sum;
}
