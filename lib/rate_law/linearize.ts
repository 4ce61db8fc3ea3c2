import type { Caution } from "../quantity/caution.ts";
import { Estimate } from "../quantity/estimate.ts";
import { formatNumber, superscript } from "../quantity/number_format.ts";
import * as option from "../quantity/options.ts";
import { rateConstantUnit } from "../quantity/rate_constant_unit.ts";
import { readQuantity } from "../quantity/read_quantity.ts";
import type { Quantity } from "../quantity/read_quantity.ts";
import { Result } from "../quantity/result.ts";
import type { Section } from "../quantity/section.ts";
import { Run } from "../run/run.ts";
import { type LinearFit, linearLeastSquares } from "../statistics/linear_least_squares.ts";
import { type FollowedSignal, followSignal } from "./followed_signal.ts";
import { type RateEquation, rateEquation } from "./rate_equation.ts";

/** How {@link linearize} draws its line. */
export interface LinearizeOptions {
  /** Name of the species or signal; needed where the run has several. */
  species?: string;
  /** Order n whose integrated law is to become a line.
   * @default {1} */
  order?: number;
  /** End value taken off the signal first.
   * @default {0} */
  endValue?: Quantity;
  /** "transformed": each point weighs what the transformation leaves of constant noise (c² for ln c,
   * c⁴ for 1/c); "equal": all alike.
   * @default {"transformed"} */
  weights?: "transformed" | "equal";
}

/** A run redrawn so that a rate law of given order is a straight line in time. */
export class Linearization extends Result {
  /** Kind of result. */
  override readonly kind: string = "linearization";
  /** The run's id. */
  readonly run: string;
  /** What is followed. */
  readonly species: string;
  /** Order n. */
  readonly order: number;
  /** Times of the points, s. */
  readonly times: Float64Array;
  /** Transformed readings: c, ln c, 1/c or c^(1−n). */
  readonly transformed: Float64Array;
  /** Weights of the points, largest 1. */
  readonly weights: Float64Array;
  /** Name of the vertical axis. */
  readonly axis: string;
  /** Slope, per s. */
  readonly slope: Estimate;
  /** Intercept at t = 0. */
  readonly intercept: Estimate;
  /** k of the rate equation. */
  readonly rateConstant: Estimate;
  /** Weighted coefficient of determination; not comparable between orders. */
  readonly rSquared: number;
  /** The equation that defines k. */
  readonly equation: RateEquation;
  /** What the reader must know. */
  override readonly cautions: readonly Caution[];

  /** A line from its parts; `linearize` makes it.
   *
   * @param parts what the line found */
  constructor(
    parts:
      & Pick<
        Linearization,
        "run" | "species" | "order" | "times" | "transformed" | "weights" | "axis" | "cautions"
      >
      & { line: LinearFit; unit: string; axisUnit: string },
  ) {
    super();
    const { line, order } = parts;
    this.run = parts.run;
    this.species = parts.species;
    this.order = order;
    this.times = parts.times;
    this.transformed = parts.transformed;
    this.weights = parts.weights;
    this.axis = parts.axis;
    const shared = { degreesOfFreedom: line.degreesOfFreedom };
    const { slope, intercept } = line;
    const [s, i] = [slope, intercept].map((e) => ({
      value: e.value,
      standardError: e.standardError,
    }));
    this.slope = new Estimate({ ...s, unit: slopeUnit(parts.axisUnit), ...shared });
    this.intercept = new Estimate({ ...i, unit: parts.axisUnit, ...shared });
    const factor = order === 1 ? -1 : 1 / (order - 1);
    this.rateConstant = new Estimate({
      value: slope.value * factor,
      standardError: slope.standardError * Math.abs(factor),
      unit: parts.unit,
      ...shared,
    });
    this.rSquared = line.rSquared;
    this.equation = rateEquation(parts.species, order);
    this.cautions = parts.cautions;
  }

  /** First line of every view. */
  override get title(): string {
    return `${this.axis} against time, order ${this.order}, run ${this.run}`;
  }

  /** Height of the line at a time in s. */
  at(time: number): number {
    return this.intercept.value + this.slope.value * time;
  }

  /** The content, in reading order. */
  override sections(): Section[] {
    return [{ kind: "equation", key: "equation", ...this.equation }, {
      kind: "values",
      rows: [
        { key: "slope", label: "slope", value: this.slope },
        { key: "intercept", label: "intercept", value: this.intercept },
        { key: "rateConstant", label: "rate constant k", value: this.rateConstant },
        {
          key: "rSquared",
          label: "r²",
          value: { value: this.rSquared, text: formatNumber(this.rSquared, 5) },
          note: "cannot be compared between orders",
        },
      ],
    }];
  }
}

/** Redraws a run so that the integrated law of order n is a straight line, c^(1−n) (ln c for n = 1)
 * against time. A picture and a check: the number to report is that of {@link fitRateLaw}.
 *
 * Noise that is constant in c is not constant in the transformed reading, so each point weighs
 * 1/(dg/dc)² = c²ⁿ.
 *
 * Source: for the weights, J. R. Taylor, An Introduction to Error Analysis, 2nd ed., 1997, ch. 8.
 *
 * @param run the run
 * @param options order, end value, weights
 * @throws {RangeError} if fewer than 3 readings stay above the end value
 * @example
 * ```ts
 * import { ok } from "node:assert";
 * import { linearize, Run } from "ratebook";
 *
 * const run = new Run({
 *   id: "1",
 *   times: { values: [0, 10, 20, 40], unit: "s" },
 *   signals: [{ name: "A", unit: "mol/L", values: [0.1, 0.0741, 0.0549, 0.0301] }],
 * });
 * ok(Math.abs(linearize(run, { order: 1 }).rateConstant.value - 0.03) < 1e-4);
 * ``` */
export function linearize(run: Run, options: LinearizeOptions = {}): Linearization {
  const read = option.readOptions("linearize", options, {
    species: option.text,
    order: option.number({ min: -5, max: 10 }),
    endValue: (value: unknown): Quantity => value as Quantity,
    weights: option.oneOf("transformed", "equal"),
  });
  if (!(run instanceof Run)) {
    throw new TypeError(
      `Cannot linearize ${String(run)}: expected one run, as runs.find(id) gives`,
    );
  }
  const { order = 1, weights = "transformed" } = read;
  const signal = followSignal(run, { species: read.species, endValue: 0 });
  const end = read.endValue === undefined
    ? 0
    : readQuantity(read.endValue, signal.unit, `the end value of run "${run.id}"`);
  const sign = Math.sign(signal.values[0] - end) || 1;
  const heights = Array.from(signal.values, (value) => sign * (value - end));
  const height = heightText(signal, order, end, sign);
  const kept = heights.map((_, i) => i).filter((i) => order === 0 || heights[i] > 0);
  if (kept.length < 3) {
    throw new RangeError(
      `Cannot draw a line of order ${order} through run "${run.id}": only ${kept.length} readings lie ` +
        `above the end value ${end} ${signal.unit}; give a lower endValue or fit with fitRateLaw`,
    );
  }
  const cautions: Caution[] = [];
  if (kept.length < heights.length) {
    const lost = heights.map((_, i) => i).filter((i) => !kept.includes(i));
    cautions.push({
      code: "points-cannot-be-drawn",
      severity: "caution",
      subject: run.id,
      message: `${lost.length} readings of run "${run.id}" (at t = ${
        lost.map((i) => formatNumber(signal.times[i], 4)).join(", ")
      } s) are not above the end value and have no ${axisText(order, height)}: the line leaves ` +
        `them out, the direct fit does not`,
    });
  }
  const x = kept.map((i) => signal.times[i]);
  const y = kept.map((i) => transform(order, heights[i]));
  const raw = kept.map((i) =>
    signal.rootWeights[i] ** 2 * (weights === "transformed" ? heights[i] ** (2 * order) : 1)
  );
  const largest = Math.max(...raw);
  const w = raw.map((value) => value / largest);
  const known = signal.isConcentration;
  return new Linearization({
    run: run.id,
    species: signal.name,
    order,
    times: Float64Array.from(x),
    transformed: Float64Array.from(y),
    weights: Float64Array.from(w),
    axis: axisText(order, height) + axisUnitText(order, known ? "mol/L" : "1"),
    axisUnit: axisUnit(order, known ? "mol/L" : "1"),
    unit: rateConstantUnit(order, { concentration: known ? "mol/L" : "1" }),
    line: linearLeastSquares({ x, y, weights: w }),
    cautions,
  });
}

function transform(order: number, height: number): number {
  return order === 1 ? Math.log(height) : height ** (1 - order);
}

function axisText(order: number, height: string): string {
  if (order === 0) return height;
  if (order === 1) return `ln ${height}`;
  return order === 2 ? `1/${height}` : `${height}${superscript(1 - order)}`;
}

/** What is transformed: `[A]` for a concentration, `(signal − 0.04)` for a raw signal. */
function heightText(signal: FollowedSignal, order: number, end: number, sign: number): string {
  const name = signal.isConcentration ? `[${signal.name}]` : signal.name;
  if (end === 0) return name;
  const value = formatNumber(end, 4).replace(/(\.\d*?)0+$/, "$1").replace(/\.$/, "");
  const difference = sign > 0 ? `${name} − ${value}` : `${value} − ${name}`;
  return order === 0 ? difference : `(${difference})`;
}

/** Unit of c^(1−n). */
function axisUnit(order: number, concentration: string): string {
  if (order === 1 || concentration === "1") return "1";
  if (order === 0) return concentration;
  return order === 2 ? "L/mol" : `(${concentration})^${Number((1 - order).toFixed(4))}`;
}

function axisUnitText(order: number, concentration: string): string {
  const unit = axisUnit(order, concentration);
  return unit === "1" ? "" : ` / ${unit}`;
}

function slopeUnit(axisUnit: string): string {
  return axisUnit === "1" ? "s⁻¹" : `${axisUnit}/s`;
}
