import type { Caution } from "../quantity/caution.ts";
import { formatNumber } from "../quantity/number_format.ts";
import type { FTest } from "../statistics/nested_f_test.ts";
import type { RateLawRank } from "./rate_law_comparison.ts";
import type { RateLawFit } from "./rate_law_fit.ts";

/** Half-lives that must be followed before a run can tell its order (common practice, no source). */
export const HALF_LIVES_NEEDED = 2;

/** A smaller difference in AICc does not set two laws apart. */
const LEAST_DIFFERENCE = 2;

/** Initial concentrations that differ by this factor tell the order between runs. */
const CONCENTRATION_SPREAD = 2;

/** Below this probability the fitted order is taken to differ from the whole number. */
const WHOLE_ORDER_PROBABILITY = 0.01;

/** The verdict on an order. */
export interface OrderVerdict {
  /** The law that the data support, if they can tell. */
  readonly best?: RateLawFit;
  /** In words, with the numbers behind it. */
  readonly verdict: string;
  /** What the reader must know. */
  readonly cautions: readonly Caution[];
}

/** Says which order the data support, or why they cannot tell.
 *
 * @param ranking laws by AICc, best first
 * @param free the law with its order fitted, if there is one
 * @param wholeOrderTest F test of the best law against that one */
export function orderVerdict(
  ranking: readonly RateLawRank[],
  free?: RateLawFit,
  wholeOrderTest?: FTest,
): OrderVerdict {
  const [first, second] = ranking.filter((entry) => entry.fit.converged);
  if (!first) {
    return refusal("no-fit-converged", "No rate law could be fitted: none of the fits converged");
  }
  const followed = Math.max(...first.fit.runs.map((run) => run.halfLivesFollowed));
  if (followed < HALF_LIVES_NEEDED && !initialConcentrationsTell(first.fit)) {
    return refusal(
      "too-few-half-lives",
      `The order cannot be told: ${
        formatNumber(followed, 2)
      } half-lives were followed and at least ` +
        `${HALF_LIVES_NEEDED} are needed; follow the reaction further, or add runs at other initial ` +
        `concentrations`,
    );
  }
  if (!Number.isFinite(first.fit.correctedAkaike)) {
    return refusal(
      "too-few-readings",
      `The order cannot be told: ${first.fit.readingCount} readings are too few to compare laws with ` +
        `${first.fit.parameters.length} parameters; take more readings`,
    );
  }
  if (second && second.difference < LEAST_DIFFERENCE) {
    return refusal(
      "orders-not-distinguishable",
      `The order cannot be told: orders ${name(first)} and ${
        name(second)
      } are not distinguishable ` +
        `(AICc differs by ${
          second.difference.toFixed(2)
        }, less than ${LEAST_DIFFERENCE}); follow the ` +
        `reaction further or add runs at other initial concentrations`,
    );
  }
  const cautions: Caution[] = [];
  let verdict = `Order ${name(first)}` +
    (second
      ? ` (next best, order ${name(second)}: AICc higher by ${second.difference.toFixed(1)})`
      : "");
  if (free && wholeOrderTest) {
    const p = wholeOrderTest.probability;
    const [low, high] = free.order.interval(0.95).map((v) => formatNumber(v, 3));
    verdict += `; fitted order ${free.order} (95 %: ${low} to ${high})`;
    if (p < WHOLE_ORDER_PROBABILITY) {
      cautions.push({
        code: "order-not-whole",
        severity: "caution",
        message:
          `The fitted order ${free.order} differs from ${name(first)} (F test p = ${
            p.toPrecision(2)
          }): ` +
          `no order of the list describes the data fully`,
      });
    }
  }
  if (first.fit.residualCheck.pattern) {
    cautions.push({
      code: "residual-pattern",
      severity: "caution",
      message: `The best law leaves a pattern: ${first.fit.residualCheck.verdict}`,
    });
  }
  return { best: first.fit, verdict, cautions };
}

function refusal(code: string, message: string): OrderVerdict {
  return { verdict: message, cautions: [{ code, severity: "serious", message }] };
}

function name(entry: RateLawRank): string {
  return formatNumber(entry.fit.order.value, 3).replace(/\.0+$/, "");
}

/** Whether the runs start from concentrations different enough to tell the order between them. */
function initialConcentrationsTell(fit: RateLawFit): boolean {
  const starts = fit.runs.map((run) =>
    run.signal.isConcentration
      ? Math.abs(run.initialValue.value - run.endValue.value)
      : run.signal.initialConcentration ?? NaN
  );
  return Math.max(...starts) / Math.min(...starts) >= CONCENTRATION_SPREAD;
}
