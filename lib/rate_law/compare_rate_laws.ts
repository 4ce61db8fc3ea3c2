import * as option from "../quantity/options.ts";
import type { Quantity } from "../quantity/read_quantity.ts";
import { akaikeWeights } from "../statistics/information_criterion.ts";
import { nestedFTest } from "../statistics/nested_f_test.ts";
import type { EndValue } from "./followed_signal.ts";
import { fitRateLaw, type FitRateLawOptions, type Runs } from "./fit_rate_law.ts";
import { orderVerdict } from "./order_verdict.ts";
import { RateLawComparison, type RateLawRank } from "./rate_law_comparison.ts";
import type { RateLawFit } from "./rate_law_fit.ts";

/** What {@link compareRateLaws} compares. */
export interface CompareRateLawsOptions extends Omit<FitRateLawOptions, "order"> {
  /** Orders to compare.
   * @default {[0, 1, 2]} */
  orders?: number[];
  /** Whether the order is also fitted, as a check on the whole numbers.
   * @default {true} */
  freeOrder?: boolean;
}

/** Fits rate laws of several orders to the same readings and ranks them by AICc, with the verdict in
 * words: which order, or that the data cannot tell.
 *
 * All laws are fitted directly to the same signal with the same nuisance parameters, so their sums
 * of squares can be compared; r² of linear plots cannot.
 *
 * Source: K. P. Burnham & D. R. Anderson, Model Selection and Multimodel Inference, 2nd ed.,
 * Springer 2002, ch. 2 (AICc, a difference below 2).
 *
 * @param runs runs at one temperature
 * @param options orders, signal, end value
 * @throws {RangeError} as {@link fitRateLaw}, or if no order is given
 * @example
 * ```ts
 * import { strictEqual } from "node:assert";
 * import { compareRateLaws, Run } from "ratebook";
 *
 * const run = new Run({
 *   id: "1",
 *   times: { values: [0, 5, 10, 15, 20, 30, 40, 50, 60], unit: "min" },
 *   signals: [{
 *     name: "ester",
 *     unit: "mmol/L",
 *     values: [10.02, 7.77, 6.08, 4.71, 3.69, 2.22, 1.36, 0.81, 0.51],
 *   }],
 * });
 * strictEqual(compareRateLaws(run).best?.order.value, 1);
 * ``` */
export function compareRateLaws(
  runs: Runs,
  options: CompareRateLawsOptions = {},
): RateLawComparison {
  const { orders = [0, 1, 2], freeOrder = true, ...rest } = option.readOptions(
    "compareRateLaws",
    options,
    {
      orders: option.list(option.number({ min: -5, max: 10 })),
      freeOrder: option.flag,
      species: option.text,
      endValue: (value: unknown): EndValue => value as Quantity,
      reactant: option.text,
      maxIterations: option.integer(1),
      signal: option.instance(AbortSignal),
    },
  );
  if (orders.length === 0) {
    throw new RangeError(`Cannot compare rate laws of no order: give orders such as [0, 1, 2]`);
  }
  const fits = [...new Set(orders)].map((order) => fitRateLaw(runs, { ...rest, order }));
  const ranking = rank(fits);
  const free = freeOrder ? fitRateLaw(runs, { ...rest, order: "free" }) : undefined;
  const best = ranking.find((entry) => entry.fit.converged)?.fit;
  const wholeOrderTest = free?.converged && best && free.degreesOfFreedom > 0
    ? nestedFTest(best, free)
    : undefined;
  const verdict = orderVerdict(ranking, free, wholeOrderTest);
  return new RateLawComparison({
    ranking,
    free,
    wholeOrderTest,
    ...verdict,
    sources: fits[0].sources,
  });
}

/** Converged fits by AICc, then those that did not converge. */
function rank(fits: readonly RateLawFit[]): RateLawRank[] {
  const usable = fits.filter((fit) => fit.converged)
    .toSorted((a, b) => a.correctedAkaike - b.correctedAkaike);
  const weights = akaikeWeights(usable.map((fit) => fit.correctedAkaike));
  const best = usable[0]?.correctedAkaike ?? NaN;
  return [
    ...usable.map((fit, i) => ({
      fit,
      difference: fit.correctedAkaike - best,
      weight: weights[i],
    })),
    ...fits.filter((fit) => !fit.converged).map((fit) => ({ fit, difference: NaN, weight: NaN })),
  ];
}
