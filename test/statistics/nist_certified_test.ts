import { describe, expect, test } from "vitest";
import {
  type Model,
  type NonlinearFit,
  nonlinearLeastSquares,
} from "../../lib/statistics/nonlinear_least_squares.ts";
import { correctDigits, reference } from "../reference/reference.ts";

interface CertifiedSet {
  readonly name: string;
  readonly model: string;
  readonly data: readonly (readonly number[])[];
  readonly starts: readonly (readonly number[])[];
  readonly certified: {
    readonly parameters: readonly number[];
    readonly standardDeviations: readonly number[];
    readonly residualSumOfSquares: number;
    readonly residualStandardDeviation: number;
    readonly degreesOfFreedom: number;
  };
}

// NIST/ITL Statistical Reference Datasets, nonlinear regression; models as in the reference file.
const { sets } = reference<{ sets: readonly CertifiedSet[] }>("nist_strd.json");

const { exp, pow } = Math;

const growth: Model = ([x], [b1, b2]) => b1 * (1 - exp(-b2 * x));
const cubicOverCubic: Model = ([x], [b1, b2, b3, b4, b5, b6, b7]) =>
  (b1 + b2 * x + b3 * x ** 2 + b4 * x ** 3) / (1 + b5 * x + b6 * x ** 2 + b7 * x ** 3);

const MODELS: Readonly<Record<string, Model>> = {
  BoxBOD: growth,
  Chwirut2: ([x], [b1, b2, b3]) => exp(-b1 * x) / (b2 + b3 * x),
  DanWood: ([x], [b1, b2]) => b1 * pow(x, b2),
  Gauss1: ([x], [b1, b2, b3, b4, b5, b6, b7, b8]) =>
    b1 * exp(-b2 * x) + b3 * exp(-((x - b4) ** 2) / b5 ** 2) + b6 * exp(-((x - b7) ** 2) / b8 ** 2),
  Hahn1: cubicOverCubic,
  Kirby2: ([x], [b1, b2, b3, b4, b5]) => (b1 + b2 * x + b3 * x ** 2) / (1 + b4 * x + b5 * x ** 2),
  MGH09: ([x], [b1, b2, b3, b4]) => b1 * (x ** 2 + b2 * x) / (x ** 2 + b3 * x + b4),
  MGH17: ([x], [b1, b2, b3, b4, b5]) => b1 + b2 * exp(-b4 * x) + b3 * exp(-b5 * x),
  Misra1a: growth,
  Misra1b: ([x], [b1, b2]) => b1 * (1 - pow(1 + b2 * x / 2, -2)),
  Nelson: ([x1, x2], [b1, b2, b3]) => b1 - b2 * x1 * exp(-b3 * x2),
  Rat42: ([x], [b1, b2, b3]) => b1 / (1 + exp(b2 - b3 * x)),
  Thurber: cubicOverCubic,
};

/** Fits a set with default options and nothing known but the start: derivatives are numeric. */
function fit(set: CertifiedSet, start: readonly number[]): NonlinearFit {
  const response = set.model.startsWith("log(y)") ? Math.log : (y: number) => y;
  return nonlinearLeastSquares({
    model: MODELS[set.name],
    x: set.data.map(([, ...predictors]) => predictors),
    y: set.data.map(([y]) => response(y)),
    start: [...start],
  });
}

const cases = sets.flatMap((set) =>
  set.starts.map((start, i) => ({ name: set.name, which: i + 1, set, start }))
);

test("all thirteen sets are here, from both starts", () => {
  expect(cases).toHaveLength(26);
});

describe.each(cases)("$name from start $which", ({ set, start }) => {
  const result = fit(set, start);
  const { certified } = set;

  test("converges, with nothing to be cautious about", () => {
    expect(result.converged, result.reason).toBe(true);
    expect(result.cautions).toEqual([]);
  });

  test("6 correct digits on every parameter", () => {
    const digits = result.parameters.map((p, j) => correctDigits(p.value, certified.parameters[j]));
    expect(Math.min(...digits), `digits ${digits}`).toBeGreaterThanOrEqual(6);
  });

  test("4 correct digits on every standard deviation", () => {
    const digits = result.parameters.map((p, j) =>
      correctDigits(p.standardError, certified.standardDeviations[j])
    );
    expect(Math.min(...digits), `digits ${digits}`).toBeGreaterThanOrEqual(4);
  });

  test("the residual sum of squares and its degrees of freedom", () => {
    expect(result.degreesOfFreedom).toBe(certified.degreesOfFreedom);
    expect(correctDigits(result.residualSumOfSquares, certified.residualSumOfSquares))
      .toBeGreaterThanOrEqual(6);
  });
});
