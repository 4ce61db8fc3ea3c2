import type { Caution } from "../quantity/caution.ts";
import { formatFixed, formatNumber } from "../quantity/number_format.ts";
import { Result, type Source } from "../quantity/result.ts";
import type { Section } from "../quantity/section.ts";
import type { FTest } from "../statistics/nested_f_test.ts";
import type { RateLawFit } from "./rate_law_fit.ts";

/** A rate law in a ranking. */
export interface RateLawRank {
  /** The fit. */
  readonly fit: RateLawFit;
  /** AICc above the best; `NaN` for a fit that did not converge. */
  readonly difference: number;
  /** Akaike weight among the laws compared. */
  readonly weight: number;
}

/** Rate laws of several orders on the same readings, ranked. */
export class RateLawComparison extends Result {
  /** Kind of result. */
  override readonly kind: string = "rate-law-comparison";
  /** The laws, best first; those that did not converge last. */
  readonly ranking: readonly RateLawRank[];
  /** The law that the data support, or `undefined` where they cannot tell. */
  readonly best?: RateLawFit;
  /** The law with its order fitted. */
  readonly free?: RateLawFit;
  /** F test of the best of the ranked laws against the one with its order fitted. */
  readonly wholeOrderTest?: FTest;
  /** The verdict in words. */
  readonly verdict: string;
  /** What the reader must know. */
  override readonly cautions: readonly Caution[];
  /** Files behind the result. */
  override readonly sources: readonly Source[];

  /** A comparison from its parts; `compareRateLaws` makes it.
   *
   * @param parts ranking and verdict */
  constructor(
    parts: Pick<
      RateLawComparison,
      "ranking" | "best" | "free" | "wholeOrderTest" | "verdict" | "cautions" | "sources"
    >,
  ) {
    super();
    this.ranking = parts.ranking;
    this.best = parts.best;
    this.free = parts.free;
    this.wholeOrderTest = parts.wholeOrderTest;
    this.verdict = parts.verdict;
    this.cautions = [
      ...parts.cautions,
      ...(parts.ranking[0]?.fit.cautions ?? []),
    ];
    this.sources = parts.sources;
  }

  /** First line of every view. */
  override get title(): string {
    const { fit } = this.ranking[0];
    const runs = fit.runs.length === 1 ? `run ${fit.runs[0].run}` : `${fit.runs.length} runs`;
    return `Rate laws of ${fit.species} compared, ${runs}`;
  }

  /** Keys of the headline values. */
  protected override headlineKeys(): readonly string[] {
    return ["verdict"];
  }

  /** The content, in reading order. */
  override sections(): Section[] {
    const rows = [
      ...this.ranking,
      ...(this.free ? [{ fit: this.free, difference: NaN, weight: NaN }] : []),
    ];
    return [
      { kind: "values", rows: [{ key: "verdict", label: "verdict", value: this.verdict }] },
      {
        kind: "table",
        key: "ranking",
        columns: [
          { key: "order", label: "order" },
          { key: "rateConstant", label: "rate constant k" },
          { key: "residualSumOfSquares", label: "weighted RSS" },
          { key: "correctedAkaike", label: "AICc" },
          { key: "difference", label: "ΔAICc" },
          { key: "weight", label: "Akaike weight" },
          { key: "residuals", label: "residuals" },
        ],
        rows: rows.map(({ fit, difference, weight }) => [
          fit.orderIsFitted ? fit.order : fit.order.value,
          fit.rateConstant,
          fit.residualSumOfSquares,
          { value: fit.correctedAkaike, text: formatFixed(fit.correctedAkaike, 2) },
          Number.isFinite(difference)
            ? { value: difference, text: formatFixed(difference, 2) }
            : null,
          Number.isFinite(weight) ? { value: weight, text: formatNumber(weight, 2) } : null,
          fit.converged ? fit.residualCheck.verdict : `not converged: ${fit.reason}`,
        ]),
      },
    ];
  }
}
