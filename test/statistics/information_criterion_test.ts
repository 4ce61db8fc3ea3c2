import { expect, test } from "vitest";
import { akaikeWeights, correctedAkaike } from "../../lib/statistics/information_criterion.ts";
import { reference } from "../reference/reference.ts";

interface CrystalViolet {
  readonly sets: readonly [{
    readonly recomputed: Readonly<
      Record<"firstOrder" | "secondOrder", {
        readonly residualSumOfSquares: string;
        readonly AICc: number;
      }>
    >;
  }];
}

const { recomputed } = reference<CrystalViolet>("crystal_violet.json").sets[0];

test.each(
  [
    // Nine readings, three parameters and the variance: K = 4, correction 2·4·5/4 = 10.
    ["firstOrder", -92.14],
    ["secondOrder", -51.66],
  ] as const,
)("crystal violet, %s: AICc %d", (order, expected) => {
  const { residualSumOfSquares, AICc } = recomputed[order];
  const criterion = correctedAkaike(Number(residualSumOfSquares), 9, 3);
  expect(criterion).toBeCloseTo(expected, 2);
  expect(criterion).toBeCloseTo(AICc, 6);
});

test("it is R's AIC of BOD less what R adds for the constant of the likelihood, plus the correction", () => {
  // R 4.2.2: AIC(nls) = 31.8230383789 with K = 3, m = 6; R's −2 ln L has the further term
  // m (1 + ln 2π). See test/reference/README.md.
  const { sets } = reference<
    { sets: { id: string; fit: { AIC: number; residualSumOfSquares: number } }[] }
  >("r_datasets.json");
  const bod = sets.find((set) => set.id === "bod")!.fit;
  const constant = 6 * (1 + Math.log(2 * Math.PI));
  const correction = 2 * 3 * 4 / (6 - 3 - 1);
  expect(correctedAkaike(bod.residualSumOfSquares, 6, 2))
    .toBeCloseTo(bod.AIC - constant + correction, 6);
});

test("with too few readings for the correction it is infinite", () => {
  expect(correctedAkaike(1, 5, 3)).toBe(Infinity);
  expect(correctedAkaike(1, 6, 3)).toBeLessThan(Infinity);
});

test("weights sum to 1 and fall by exp(−Δ/2)", () => {
  const weights = akaikeWeights([-92.14, -51.66, -90.14]);
  expect(weights.reduce((sum, w) => sum + w, 0)).toBeCloseTo(1, 12);
  expect(weights[2] / weights[0]).toBeCloseTo(Math.exp(-1), 12);
  expect(weights[1]).toBeLessThan(1e-8);
});

test("weights do not overflow, and a model without a criterion gets none", () => {
  expect(akaikeWeights([1e5, 1e5 + 2, Infinity])[2]).toBe(0);
  expect(akaikeWeights([-1e5, -1e5])).toEqual([0.5, 0.5]);
});
