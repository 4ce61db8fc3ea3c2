import { describe, expect, test } from "vitest";
import fc from "fast-check";
import {
  type Model,
  nonlinearLeastSquares,
  type NonlinearLeastSquaresOptions,
} from "../../lib/statistics/nonlinear_least_squares.ts";
import { correctDigits, reference } from "../reference/reference.ts";

interface ReferenceFit {
  readonly id: string;
  readonly data: readonly (readonly number[])[];
  readonly fit: {
    readonly estimates: readonly number[];
    readonly standardErrors: readonly number[];
    readonly covariance: readonly (readonly number[])[];
    readonly wald95: readonly (readonly [number, number])[];
    readonly residualSumOfSquares: number;
    readonly degreesOfFreedom: number;
  };
}

interface CrystalViolet {
  readonly sets: readonly [{
    readonly data: { readonly time: number[]; readonly absorbance: number[] };
    readonly recomputed: Readonly<
      Record<"firstOrder" | "secondOrder", {
        readonly estimates: readonly string[];
        readonly standardErrors: readonly string[];
        readonly residualSumOfSquares: string;
      }>
    >;
  }];
}

const [crystalViolet] = reference<CrystalViolet>("crystal_violet.json").sets;
const { time, absorbance } = crystalViolet.data;
const firstOrder: Model = ([t], [a0, end, k]) => end + (a0 - end) * Math.exp(-k * t);
const secondOrder: Model = ([t], [a0, end, k]) => end + (a0 - end) / (1 + k * t);

const decay: NonlinearLeastSquaresOptions = {
  model: firstOrder,
  x: time.map((t) => [t]),
  y: absorbance,
  start: [1, 0, 0.1],
};

describe("crystal violet with the end value free", () => {
  // Readings: Colby College, physical chemistry, Example 3.2.1; fits in 40-digit arithmetic, see
  // test/reference/README.md.
  test.each(
    [
      ["firstOrder", firstOrder],
      ["secondOrder", secondOrder],
    ] as const,
  )("%s: estimates, standard errors, sum of squares", (name, model) => {
    const fit = nonlinearLeastSquares({ ...decay, model });
    const expected = crystalViolet.recomputed[name];
    fit.parameters.forEach((p, j) => {
      expect(correctDigits(p.value, Number(expected.estimates[j]))).toBeGreaterThanOrEqual(6);
      expect(correctDigits(p.standardError, Number(expected.standardErrors[j])))
        .toBeGreaterThanOrEqual(5);
    });
    expect(correctDigits(fit.residualSumOfSquares, Number(expected.residualSumOfSquares)))
      .toBeGreaterThanOrEqual(8);
    expect(fit.degreesOfFreedom).toBe(6);
  });

  test("prints by the GUM rule, with the 95 % interval of ± 0.0047 /min", () => {
    const fit = nonlinearLeastSquares({ ...decay, units: ["AU", "AU", "1/min"] });
    expect(fit.parameters[2].toString()).toBe("0.2902 ± 0.0019 1/min");
    const [low, high] = fit.parameters[2].interval();
    expect((high - low) / 2).toBeCloseTo(0.0047, 4);
  });
});

describe("the fits of R nls", () => {
  // R 4.2.2, nls on the base datasets Puromycin and BOD, see test/reference/README.md.
  const { sets } = reference<{ sets: readonly ReferenceFit[] }>("r_datasets.json");
  const michaelis: Model = ([c], [v, k]) => v * c / (k + c);
  const MODELS: Readonly<Record<string, { model: Model; start: number[]; weights?: boolean }>> = {
    "puromycin-treated": { model: michaelis, start: [150, 0.1] },
    "puromycin-treated-weighted": { model: michaelis, start: [150, 0.1], weights: true },
    "puromycin-untreated": { model: michaelis, start: [150, 0.1] },
    "puromycin-shared-k": {
      model: ([c, z], [v, d, k]) => (v + d * z) * c / (k + c),
      start: [150, 10, 0.1],
    },
    "bod": { model: ([t], [a, k]) => a * (1 - Math.exp(-k * t)), start: [10, 0.1] },
  };

  test.each(sets)("$id", ({ id, data, fit: expected }) => {
    const { model, start, weights } = MODELS[id];
    const y = data.map((row) => row.at(-1)!);
    const fit = nonlinearLeastSquares({
      model,
      start,
      x: data.map((row) => row.slice(0, -1)),
      y,
      ...(weights ? { weights: y.map((value) => value ** -2) } : {}),
    });
    expect(fit.degreesOfFreedom).toBe(expected.degreesOfFreedom);
    expect(correctDigits(fit.residualSumOfSquares, expected.residualSumOfSquares))
      .toBeGreaterThanOrEqual(8);
    fit.parameters.forEach((p, i) => {
      expect(correctDigits(p.value, expected.estimates[i])).toBeGreaterThanOrEqual(6);
      expect(correctDigits(p.standardError, expected.standardErrors[i])).toBeGreaterThanOrEqual(6);
      const interval = p.interval();
      expected.wald95[i].forEach((end, e) =>
        expect(Math.abs(interval[e] - end)).toBeLessThan(1e-6 * p.standardError)
      );
      expected.covariance[i].forEach((value, j) => {
        const size = Math.sqrt(expected.covariance[i][i] * expected.covariance[j][j]);
        expect(Math.abs(fit.covariance[i][j] - value) / size).toBeLessThan(1e-6);
      });
    });
  });
});

describe("properties", () => {
  test("data without noise give back the parameters they were made from", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.1, max: 10, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.double({ min: 0.05, max: 2, noNaN: true }),
        (amplitude, end, k) => {
          const truth = [end + amplitude, end, k];
          const x = Array.from({ length: 20 }, (_, i) => [i * 4 / k / 19]);
          const fit = nonlinearLeastSquares({
            model: firstOrder,
            x,
            y: x.map((row) => firstOrder(row, truth)),
            start: [1, 0, 0.5],
          });
          expect(fit.converged, fit.reason).toBe(true);
          fit.parameters.forEach((p, j) =>
            expect(Math.abs(p.value - truth[j])).toBeLessThan(1e-7 * amplitude + 1e-7 * k)
          );
        },
      ),
      { numRuns: 60 },
    );
  });

  test("weights all multiplied by one number change neither estimates nor errors", () => {
    const weights = absorbance.map((a) => 1 / (0.01 + a));
    const one = nonlinearLeastSquares({ ...decay, weights });
    const other = nonlinearLeastSquares({ ...decay, weights: weights.map((w) => 1e6 * w) });
    one.parameters.forEach((p, j) => {
      expect(correctDigits(other.parameters[j].value, p.value)).toBeGreaterThan(6);
      expect(correctDigits(other.parameters[j].standardError, p.standardError)).toBeGreaterThan(5);
    });
  });

  test("every reading twice leaves the estimates, and shrinks the errors by the degrees of freedom", () => {
    const one = nonlinearLeastSquares(decay);
    const twice = nonlinearLeastSquares({
      ...decay,
      x: [...decay.x, ...decay.x],
      y: [...decay.y, ...decay.y],
    });
    // Var = RSS/(m − n)·(JᵀJ)⁻¹: both RSS and JᵀJ double, m − n goes from 6 to 15.
    twice.parameters.forEach((p, j) => {
      expect(correctDigits(p.value, one.parameters[j].value)).toBeGreaterThan(6);
      expect(correctDigits(p.standardError, one.parameters[j].standardError * Math.sqrt(6 / 15)))
        .toBeGreaterThan(5);
    });
  });

  test("known uncertainties are not scaled by the residuals", () => {
    const sigma = 0.01;
    const known = nonlinearLeastSquares({
      ...decay,
      weights: absorbance.map(() => sigma ** -2),
      knownUncertainties: true,
    });
    const scaled = nonlinearLeastSquares(decay);
    const s = Math.sqrt(scaled.residualSumOfSquares / scaled.degreesOfFreedom);
    known.parameters.forEach((p, j) => {
      expect(correctDigits(p.standardError, scaled.parameters[j].standardError * sigma / s))
        .toBeGreaterThan(5);
      expect(p.degreesOfFreedom).toBeUndefined();
      // A known error takes the normal distribution: 1.959964 standard errors to each side.
      const [low, high] = p.interval();
      expect((high - low) / 2 / p.standardError).toBeCloseTo(1.959964, 5);
    });
  });
});

describe("honest ends", () => {
  test("a search cut short is marked, without standard errors", () => {
    const fit = nonlinearLeastSquares({ ...decay, start: [10, 5, 3], maxIterations: 1 });
    expect(fit.converged).toBe(false);
    expect(fit.title).toContain("NOT CONVERGED");
    expect(fit.cautions.map((c) => [c.code, c.severity])).toContainEqual([
      "not-converged",
      "serious",
    ]);
    fit.parameters.forEach((p) => expect(p.standardError).toBeNaN());
    expect(fit.toString()).toContain("Serious caution: The fit did not converge");
  });

  test("an aborted search hands back its best point, marked", () => {
    const controller = new AbortController();
    controller.abort();
    const fit = nonlinearLeastSquares({ ...decay, signal: controller.signal });
    expect(fit.converged).toBe(false);
    expect(fit.parameters.map((p) => Number.isFinite(p.value))).toEqual([true, true, true]);
  });

  test("a parameter that ends at its bound has no standard error, and a caution", () => {
    const fit = nonlinearLeastSquares({
      ...decay,
      names: ["A0", "Aend", "k"],
      bounds: [undefined, [-Infinity, 0.03], undefined],
    });
    expect(fit.converged, fit.reason).toBe(true);
    expect(fit.parameters[1].value).toBe(0.03);
    expect(fit.parameters[1].standardError).toBeNaN();
    expect(fit.parameters[2].standardError).toBeGreaterThan(0);
    expect(fit.cautions).toMatchObject([{ code: "parameter-at-bound", subject: "Aend" }]);
  });

  test("a bound that does not bind changes nothing", () => {
    const free = nonlinearLeastSquares(decay);
    const bound = nonlinearLeastSquares({ ...decay, bounds: [[0, 10], [-1, 1], [0, 10]] });
    bound.parameters.forEach((p, j) => {
      expect(correctDigits(p.value, free.parameters[j].value)).toBeGreaterThan(6);
      expect(correctDigits(p.standardError, free.parameters[j].standardError)).toBeGreaterThan(4);
    });
  });

  test("parameters that only count together are named, without standard errors", () => {
    const fit = nonlinearLeastSquares({
      ...decay,
      model: ([t], [a, b, k]) => a * b * Math.exp(-k * t),
      names: ["a", "b", "k"],
    });
    const caution = fit.cautions.find((c) => c.code === "not-identifiable");
    expect(caution?.subject).toBe("a, b");
    expect(fit.parameters[0].standardError).toBeNaN();
    expect(fit.parameters[1].standardError).toBeNaN();
    expect(fit.parameters[2].standardError).toBeGreaterThan(0);
  });

  test("from any start, the end is the minimum or k has no standard error", () => {
    // Starts on plateaus and in the limit k → 0, where k and the end value only count together.
    for (const k of [-2, -1.5, -1, -0.5, 0, 1, 10, 36, 100, 370, 800]) {
      const fit = nonlinearLeastSquares({ ...decay, start: [1, 0, k] });
      const right = Math.abs(fit.parameters[2].value - 0.290201) < 1e-5;
      expect(right || Number.isNaN(fit.parameters[2].standardError), `from k = ${k}: ${fit}`)
        .toBe(true);
      if (!right) expect(fit.cautions.map((c) => c.severity)).toContain("serious");
    }
  });

  test("as many parameters as readings leave no error to speak of", () => {
    const fit = nonlinearLeastSquares({ ...decay, x: [[0], [3], [9]], y: [1.2, 0.526, 0.133] });
    expect(fit.degreesOfFreedom).toBe(0);
    fit.parameters.forEach((p) => expect(p.standardError).toBeNaN());
  });
});

describe("refusals", () => {
  test.each<[string, Record<string, unknown>, string]>([
    ["an unknown option", { weight: [1] }, `did you mean "weights"?`],
    ["lengths that differ", { y: [1, 2] }, `"x" has 9 entries and "y" has 2`],
    ["a negative weight", { weights: [-1, ...absorbance.slice(1)] }, "Cannot use -1"],
    ["a reading that is no number", { y: [NaN, ...absorbance.slice(1)] }, "Cannot use NaN"],
    ["too few readings", { x: [[0], [1]], y: [1, 2] }, "Cannot fit 3 parameters"],
    [
      "a start outside its bounds",
      { bounds: [[5, 6], undefined, undefined] },
      "Cannot start b1 at 1",
    ],
    ["a start where the model is not finite", { model: () => NaN }, "finite"],
    [
      "a missing model",
      { model: undefined },
      `the option "model" of nonlinearLeastSquares is missing`,
    ],
    ["bounds the wrong way round", { bounds: [[2, 0], undefined, undefined] }, "bounds"],
    ["bounds that are no pair", { bounds: [5, undefined, undefined] }, "bounds"],
  ])("%s", (_, change, message) => {
    expect(() => nonlinearLeastSquares({ ...decay, ...change } as NonlinearLeastSquaresOptions))
      .toThrow(message);
  });
});
