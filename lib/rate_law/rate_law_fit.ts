import type { Caution } from "../quantity/caution.ts";
import type { Estimate } from "../quantity/estimate.ts";
import { formatFixed, formatNumber } from "../quantity/number_format.ts";
import { Result, type Source } from "../quantity/result.ts";
import type { Section } from "../quantity/section.ts";
import type { ResidualCheck } from "../statistics/residual_check.ts";
import type { FollowedSignal } from "./followed_signal.ts";
import type { RateEquation } from "./rate_equation.ts";

/** What a rate-law fit says of one run. */
export interface RunFit {
  /** The run's id. */
  readonly run: string;
  /** Temperature, K, where known. */
  readonly temperature?: number;
  /** Signal at t = 0, extrapolated. */
  readonly initialValue: Estimate;
  /** Signal at the end; without error where it was given. */
  readonly endValue: Estimate;
  /** Time for half of the reactant to be used up from t = 0. */
  readonly halfLife: Estimate;
  /** Half-lives by which the reactant had fallen at the last reading. */
  readonly halfLivesFollowed: number;
  /** Readings that went into the fit. */
  readonly signal: FollowedSignal;
  /** Reading less model at each of them, unit of the signal. */
  readonly residuals: Float64Array;
  /** The modelled signal, canonical unit, at a time in s. */
  readonly at: (time: number) => number;
}

/** All that a {@link RateLawFit} is made from. */
export type RateLawFitParts =
  & Pick<
    RateLawFit,
    | "species"
    | "order"
    | "orderIsFitted"
    | "rateConstant"
    | "equation"
    | "runs"
    | "parameters"
    | "names"
    | "covariance"
    | "residualSumOfSquares"
    | "degreesOfFreedom"
    | "correctedAkaike"
    | "residualCheck"
    | "converged"
    | "reason"
    | "cautions"
    | "concentrationIsKnown"
  >
  & { readonly sources: readonly Source[] };

/** A direct weighted fit of an integrated rate law to the signals of one or more runs. */
export class RateLawFit extends Result {
  /** Kind of result. */
  override readonly kind: string = "rate-law-fit";
  /** What is followed. */
  readonly species: string;
  /** Order n; without error where it was given. */
  readonly order: Estimate;
  /** Whether the order was fitted. */
  readonly orderIsFitted: boolean;
  /** k of the rate equation. */
  readonly rateConstant: Estimate;
  /** The equation that defines k. */
  readonly equation: RateEquation;
  /** What the fit says of each run. */
  readonly runs: readonly RunFit[];
  /** All fitted parameters, shared ones first. */
  readonly parameters: readonly number[];
  /** Their names. */
  readonly names: readonly string[];
  /** Their covariance. */
  readonly covariance: readonly (readonly number[])[];
  /** Weighted sum of squares of the residuals. */
  readonly residualSumOfSquares: number;
  /** Readings less parameters. */
  readonly degreesOfFreedom: number;
  /** Corrected Akaike criterion. */
  readonly correctedAkaike: number;
  /** Whether the residuals look like noise. */
  readonly residualCheck: ResidualCheck;
  /** Whether a minimum was reached. */
  readonly converged: boolean;
  /** Why the search ended. */
  readonly reason: string;
  /** Whether the reactant's concentration is known, so that k has its full unit. */
  readonly concentrationIsKnown: boolean;
  /** What the reader must know. */
  override readonly cautions: readonly Caution[];
  /** Files behind the result. */
  override readonly sources: readonly Source[];

  /** A fit from its parts; `fitRateLaw` makes it.
   *
   * @param parts what the fit found */
  constructor(parts: RateLawFitParts) {
    super();
    this.species = parts.species;
    this.order = parts.order;
    this.orderIsFitted = parts.orderIsFitted;
    this.rateConstant = parts.rateConstant;
    this.equation = parts.equation;
    this.runs = parts.runs;
    this.parameters = parts.parameters;
    this.names = parts.names;
    this.covariance = parts.covariance;
    this.residualSumOfSquares = parts.residualSumOfSquares;
    this.degreesOfFreedom = parts.degreesOfFreedom;
    this.correctedAkaike = parts.correctedAkaike;
    this.residualCheck = parts.residualCheck;
    this.converged = parts.converged;
    this.reason = parts.reason;
    this.concentrationIsKnown = parts.concentrationIsKnown;
    this.cautions = parts.cautions;
    this.sources = parts.sources;
  }

  /** Number of readings that went in. */
  get readingCount(): number {
    return this.runs.reduce((sum, run) => sum + run.signal.values.length, 0);
  }

  /** First line of every view. */
  override get title(): string {
    const runs = this.runs.length === 1 ? `run ${this.runs[0].run}` : `${this.runs.length} runs`;
    const order = this.orderIsFitted ? "order fitted" : `order ${this.order.value}`;
    const end = this.converged ? "" : ", NOT CONVERGED";
    return `Rate law of ${this.species}, ${order}: ${runs}, ${this.readingCount} readings${end}`;
  }

  /** The fitted run of this id.
   *
   * @throws {RangeError} if there is none */
  run(id: string): RunFit {
    const found = this.runs.find((run) => run.run === id);
    if (found) return found;
    throw new RangeError(
      `Cannot find run "${id}" in the fit: there are ${this.runs.map((r) => r.run).join(", ")}`,
    );
  }

  /** Keys of the headline values. */
  protected override headlineKeys(): readonly string[] {
    return ["rateConstant"];
  }

  /** The content, in reading order. */
  override sections(): Section[] {
    const interval = this.rateConstant.interval(0.95).map((v) => formatNumber(v, 4));
    return [
      { kind: "equation", key: "equation", ...this.equation },
      {
        kind: "values",
        rows: [
          {
            key: "rateConstant",
            label: "rate constant k",
            value: this.rateConstant,
            note: `95 %: ${interval[0]} to ${interval[1]}`,
          },
          {
            key: "order",
            label: "order n",
            value: this.orderIsFitted ? this.order : this.order.value,
            note: this.orderIsFitted ? "fitted" : "given",
          },
          {
            key: "residualSumOfSquares",
            label: "weighted residual sum of squares",
            value: this.residualSumOfSquares,
            note: `${this.degreesOfFreedom} degrees of freedom`,
          },
          {
            key: "correctedAkaike",
            label: "AICc",
            value: { value: this.correctedAkaike, text: formatFixed(this.correctedAkaike, 2) },
          },
          { key: "residuals", label: "residuals", value: this.residualCheck.verdict },
        ],
      },
      {
        kind: "table",
        key: "runs",
        columns: [
          { key: "run", label: "run" },
          { key: "temperature", label: "T / K" },
          { key: "initialValue", label: "initial value" },
          { key: "endValue", label: "end value" },
          { key: "halfLife", label: "half-life" },
          { key: "halfLivesFollowed", label: "half-lives followed" },
        ],
        rows: this.runs.map((run) => [
          run.run,
          run.temperature === undefined
            ? null
            : { value: run.temperature, text: formatFixed(run.temperature, 2) },
          run.initialValue,
          run.endValue.standardError === 0
            ? `${formatNumber(run.endValue.value, 4)} (given)`
            : run.endValue,
          run.halfLife,
          { value: run.halfLivesFollowed, text: formatNumber(run.halfLivesFollowed, 2) },
        ]),
      },
    ];
  }
}
