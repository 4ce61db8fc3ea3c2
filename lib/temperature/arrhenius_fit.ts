import type { Caution } from "../quantity/caution.ts";
import { GAS_CONSTANT } from "../quantity/constants.ts";
import { Estimate } from "../quantity/estimate.ts";
import { formatFixed, formatNumber } from "../quantity/number_format.ts";
import type { Quantity } from "../quantity/read_quantity.ts";
import { readQuantity } from "../quantity/read_quantity.ts";
import { Result, type Source } from "../quantity/result.ts";
import type { Section } from "../quantity/section.ts";
import { studentFactor } from "../statistics/distributions.ts";
import type { FTest } from "../statistics/nested_f_test.ts";
import type { RateEquation } from "../rate_law/rate_equation.ts";
import { PredictedRateConstant } from "./predicted_rate_constant.ts";
import { extrapolationCautions } from "./temperature_gates.ts";

/** A rate constant at one temperature. */
export interface RateConstantPoint {
  /** Temperature, K. */
  readonly temperature: number;
  /** Rate constant. */
  readonly rateConstant: Estimate;
  /** The run it is from, where it is from one. */
  readonly run?: string;
}

/** Two named bands at one temperature. */
export interface ArrheniusBand {
  /** Temperature, K. */
  readonly temperature: number;
  /** Rate constant of the line. */
  readonly value: number;
  /** Where the line itself lies. */
  readonly confidence: readonly [number, number];
  /** Where a single further rate constant would lie. */
  readonly prediction: readonly [number, number];
}

/** What an {@link ArrheniusFit} is made from: ln k_ref and Ea at the reference temperature where the
 * two do not correlate. */
export interface ArrheniusFitParts {
  /** Rate constants behind the line. */
  readonly points: readonly RateConstantPoint[];
  /** Temperature at which ln k and Ea do not correlate, K. */
  readonly referenceTemperature: number;
  /** ln of k at the reference temperature, k in `unit`. */
  readonly logReference: number;
  /** Its variance. */
  readonly logReferenceVariance: number;
  /** Ea, J/mol. */
  readonly activationEnergy: number;
  /** Its variance, (J/mol)². */
  readonly activationEnergyVariance: number;
  /** Variance of ln k of a single point about the line. */
  readonly pointVariance: number;
  /** Infinite for trusted stated uncertainties. */
  readonly degreesOfFreedom: number;
  /** Unit of k. */
  readonly unit: string;
  /** ln k less line, one a point. */
  readonly residuals: Float64Array;
  /** Σ(residual/u)², where uncertainties were stated. */
  readonly chiSquare?: number;
  /** Its probability. */
  readonly chiSquareProbability?: number;
  /** F test of the line against the runs, for a fit to runs. */
  readonly lackOfFit?: FTest;
  /** The rate equation that defines k. */
  readonly equation?: RateEquation;
  /** What the line was fitted to. */
  readonly origin: "rate constants" | "runs";
  /** What the reader must know. */
  readonly cautions: readonly Caution[];
  /** Files behind it. */
  readonly sources?: readonly Source[];
}

/** The Arrhenius equation k = A·exp(−Ea/RT) fitted to rate constants or to runs. */
export class ArrheniusFit extends Result {
  /** Kind of result. */
  override readonly kind: string = "arrhenius-fit";
  /** The rate constants, or those of the runs taken one by one. */
  readonly points: readonly RateConstantPoint[];
  /** Ea, kJ/mol. */
  readonly activationEnergy: Estimate;
  /** A; its error is symmetric in ln A. */
  readonly preExponentialFactor: Estimate;
  /** k at the reference temperature. */
  readonly rateConstantAtReference: Estimate;
  /** Temperature at which ln k and Ea do not correlate, K. */
  readonly referenceTemperature: number;
  /** Covariance of [ln A, Ea], Ea in J/mol. */
  readonly covariance: readonly (readonly number[])[];
  /** Correlation of ln A and Ea. */
  readonly correlation: number;
  /** Lowest and highest temperature measured, K. */
  readonly temperatureRange: readonly [number, number];
  /** ln k less line, one a point. */
  readonly residuals: Float64Array;
  /** Σ(residual/u)² about the line, where uncertainties were stated. */
  readonly chiSquare?: number;
  /** Its probability if the stated uncertainties are all there is. */
  readonly chiSquareProbability?: number;
  /** F test of the line against a rate constant of each run's own, for a fit to runs. */
  readonly lackOfFit?: FTest;
  /** The rate equation that defines k, where it is known. */
  readonly rateEquation?: RateEquation;
  /** Whether the line was fitted to rate constants or to the runs themselves. */
  readonly origin: "rate constants" | "runs";
  /** What the reader must know. */
  override readonly cautions: readonly Caution[];
  /** Files behind the result. */
  override readonly sources: readonly Source[];
  readonly #parts: ArrheniusFitParts;

  /** A fit about its reference temperature; `fitArrhenius` makes it.
   *
   * @param parts the fit about its reference temperature */
  constructor(parts: ArrheniusFitParts) {
    super();
    this.#parts = parts;
    this.points = parts.points;
    this.origin = parts.origin;
    this.residuals = parts.residuals;
    this.chiSquare = parts.chiSquare;
    this.chiSquareProbability = parts.chiSquareProbability;
    this.lackOfFit = parts.lackOfFit;
    this.rateEquation = parts.equation;
    this.referenceTemperature = parts.referenceTemperature;
    this.cautions = parts.cautions;
    this.sources = parts.sources ?? [];
    const temperatures = parts.points.map((point) => point.temperature);
    this.temperatureRange = [Math.min(...temperatures), Math.max(...temperatures)];
    const energy = parts.activationEnergy;
    const energyVariance = parts.activationEnergyVariance;
    const known = { degreesOfFreedom: parts.degreesOfFreedom };
    // ln A = ln k_ref + Ea/(R·T_ref); ln k_ref and Ea do not correlate.
    const perEnergy = 1 / (GAS_CONSTANT * parts.referenceTemperature);
    const logA = parts.logReference + energy * perEnergy;
    const logAVariance = parts.logReferenceVariance + energyVariance * perEnergy ** 2;
    const shared = energyVariance * perEnergy;
    this.covariance = [[logAVariance, shared], [shared, energyVariance]];
    this.correlation = shared / Math.sqrt(logAVariance * energyVariance);
    this.activationEnergy = new Estimate({
      value: energy / 1000,
      standardError: Math.sqrt(energyVariance) / 1000,
      unit: "kJ/mol",
      ...known,
    });
    this.preExponentialFactor = logarithmic(logA, logAVariance, parts);
    this.rateConstantAtReference = logarithmic(
      parts.logReference,
      parts.logReferenceVariance,
      parts,
    );
  }

  /** First line of every view. */
  override get title(): string {
    const count = this.origin === "runs"
      ? `${this.points.length} runs`
      : `${this.points.length} points`;
    const [low, high] = this.temperatureRange.map((t) => formatNumber(t, 5));
    return `Arrhenius equation fitted to ${count}, ${low} to ${high} K`;
  }

  /** k at a temperature with its standard error (covariance included) and its cautions.
   *
   * @param temperature K, or text with its unit
   * @throws {RangeError} at 0 K or below */
  rateConstantAt(temperature: Quantity): PredictedRateConstant {
    const kelvin = readTemperature(temperature);
    const { height, variance } = this.#line(kelvin);
    return new PredictedRateConstant(
      logarithmicInput(height, variance, this.#parts),
      kelvin,
      [...extrapolationCautions(kelvin, this.temperatureRange), ...this.cautions],
    );
  }

  /** Confidence band of the line and prediction band of a further rate constant, both two-sided.
   *
   * @param temperature K, or text with its unit @param level coverage */
  band(temperature: Quantity, level = 0.95): ArrheniusBand {
    const kelvin = readTemperature(temperature);
    const { height, variance } = this.#line(kelvin);
    const t = studentFactor(level, this.#parts.degreesOfFreedom);
    const around = (v: number): [number, number] => {
      const half = t * Math.sqrt(v);
      return [Math.exp(height - half), Math.exp(height + half)];
    };
    return {
      temperature: kelvin,
      value: Math.exp(height),
      confidence: around(variance),
      prediction: around(variance + this.#parts.pointVariance),
    };
  }

  /** Degrees of freedom behind the errors; infinite where stated uncertainties were trusted. */
  get degreesOfFreedom(): number {
    return this.#parts.degreesOfFreedom;
  }

  /** Keys of the headline values. */
  protected override headlineKeys(): readonly string[] {
    return ["activationEnergy", "preExponentialFactor", "rateConstantAtReference"];
  }

  /** The content, in reading order. */
  override sections(): Section[] {
    const interval = this.activationEnergy.interval().map((v) => formatNumber(v, 4));
    const hasInterval = Number.isFinite(this.activationEnergy.standardError);
    const a = this.preExponentialFactor.interval().map((v) => formatNumber(v, 3));
    return [
      {
        kind: "equation",
        key: "equation",
        text: "k = A·exp(−Ea/RT)" + (this.rateEquation ? `, ${this.rateEquation.text}` : ""),
        latex: "k = A\\,\\exp\\!\\left(-\\frac{E_\\mathrm{a}}{RT}\\right)" +
          (this.rateEquation ? `,\\qquad ${this.rateEquation.latex}` : ""),
      },
      {
        kind: "values",
        rows: [
          {
            key: "activationEnergy",
            label: "activation energy Ea",
            value: this.activationEnergy,
            note: hasInterval ? `95 %: ${interval[0]} to ${interval[1]} kJ/mol` : undefined,
          },
          {
            key: "preExponentialFactor",
            label: "pre-exponential factor A",
            value: this.preExponentialFactor,
            note: hasInterval ? `95 %: ${a[0]} to ${a[1]}` : undefined,
          },
          {
            key: "rateConstantAtReference",
            label: `k at ${formatNumber(this.referenceTemperature, 5)} K`,
            value: this.rateConstantAtReference,
            note: "the temperature at which ln k and Ea do not correlate",
          },
          {
            key: "correlation",
            label: "correlation of ln A and Ea",
            value: this.correlation,
            note: "use both with their covariance, or k at the reference temperature",
          },
          ...this.#scatterRows(),
        ],
      },
      {
        kind: "table",
        key: "points",
        columns: [
          ...(this.origin === "runs" ? [{ key: "run", label: "run" }] : []),
          { key: "temperature", label: "T / K" },
          { key: "rateConstant", label: "k" },
          { key: "residual", label: "ln k less line" },
        ],
        rows: this.points.map((point, i) => [
          ...(this.origin === "runs" ? [point.run ?? null] : []),
          { value: point.temperature, text: formatNumber(point.temperature, 5) },
          point.rateConstant,
          { value: this.residuals[i], text: formatFixed(this.residuals[i], 4) },
        ]),
      },
    ];
  }

  #scatterRows(): Extract<Section, { kind: "values" }>["rows"] {
    if (this.lackOfFit) {
      const { f, degreesOfFreedom: [a, b], probability } = this.lackOfFit;
      return [{
        key: "lackOfFit",
        label: "runs about the line",
        value: `F(${a}, ${b}) = ${formatNumber(f, 3)}, p = ${probability.toPrecision(2)}`,
      }];
    }
    if (this.chiSquareProbability === undefined) return [];
    return [{
      key: "chiSquare",
      label: "scatter about the line",
      value: `χ² = ${formatNumber(this.chiSquare!, 3)}, ν = ${this.points.length - 2}, p = ${
        this.chiSquareProbability.toPrecision(2)
      }`,
    }];
  }

  #line(kelvin: number): { height: number; variance: number } {
    const parts = this.#parts;
    const lever = (1 / parts.referenceTemperature - 1 / kelvin) / GAS_CONSTANT;
    return {
      height: parts.logReference + parts.activationEnergy * lever,
      variance: parts.logReferenceVariance + parts.activationEnergyVariance * lever ** 2,
    };
  }
}

function readTemperature(temperature: Quantity): number {
  const kelvin = readQuantity(temperature, "K", "temperature");
  if (kelvin > 0) return kelvin;
  throw new RangeError(
    `Cannot give a rate constant at ${kelvin} K: write a temperature above 0 K, such as "25 °C"`,
  );
}

function logarithmic(log: number, variance: number, parts: ArrheniusFitParts): Estimate {
  return new Estimate(logarithmicInput(log, variance, parts));
}

function logarithmicInput(
  log: number,
  variance: number,
  parts: ArrheniusFitParts,
): ConstructorParameters<typeof Estimate>[0] {
  const value = Math.exp(log);
  return {
    value,
    standardError: value * Math.sqrt(variance),
    unit: parts.unit,
    degreesOfFreedom: parts.degreesOfFreedom,
    symmetricOn: "logarithmic",
  };
}
