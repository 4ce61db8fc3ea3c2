import { durbinWatson } from "./durbin_watson.ts";
import { runsTest } from "./runs_test.ts";

/** Whether residuals look like noise, with the numbers behind the verdict. */
export interface ResidualCheck {
  /** Verdict in words. */
  readonly verdict: string;
  /** Whether a pattern was found. */
  readonly pattern: boolean;
  /** Exact probability of so few runs of one sign. */
  readonly runsProbability: number;
  /** Number of runs of one sign. */
  readonly runs: number;
  /** Durbin–Watson statistic. */
  readonly durbinWatson: number;
}

/** Below this probability too few runs of one sign count as a pattern. */
const PATTERN_PROBABILITY = 0.05;

/** The check where the model goes through every reading. */
const NOTHING_LEFT: ResidualCheck = {
  verdict: "the model goes through every reading: there are no residuals to look at",
  pattern: false,
  runsProbability: 1,
  runs: 0,
  durbinWatson: NaN,
};

/** Looks for a pattern in residuals that are in the order of time: the runs test decides, the
 * Durbin–Watson statistic is shown with it.
 *
 * @param series residuals of each run, in the order of time; runs are not joined end to end */
export function checkResiduals(series: readonly ArrayLike<number>[]): ResidualCheck {
  const left = series.filter((residuals) => Array.from(residuals).some((r) => r !== 0));
  if (left.length === 0) return NOTHING_LEFT;
  const tests = left.map(runsTest);
  // Fisher's combination needs continuous probabilities; the least one with a Bonferroni factor is
  // valid for the discrete ones of short series.
  const least = Math.min(...tests.map((test) => test.probability));
  const runsProbability = Math.min(1, least * left.length);
  const statistic = average(left.map(durbinWatson));
  const runs = tests.reduce((sum, test) => sum + test.runs, 0);
  const pattern = runsProbability < PATTERN_PROBABILITY;
  const numbers = `runs test p = ${runsProbability.toPrecision(2)}, Durbin–Watson ${
    statistic.toFixed(2)
  }`;
  const verdict = pattern
    ? `residuals hang together: the model misses a trend (${numbers})`
    : `no trend in the residuals (${numbers})`;
  return { verdict, pattern, runsProbability, runs, durbinWatson: statistic };
}

function average(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
