import { describe, expect, test } from "vitest";
import { linearize } from "../../lib/rate_law/linearize.ts";
import { correctDigits, reference } from "../reference/reference.ts";
import { makeRun } from "./make_run.ts";

interface Law {
  id: string;
  data: { time: number[]; concentration: number[] };
  units: { time: string };
  recomputed: { order: number; k: number; r2ByOrder: number[] };
}

const laws = reference<{ sets: Law[] }>("integrated_rate_laws.json").sets
  .filter((set) => set.recomputed.r2ByOrder);

test("there are published sets to check against", () => {
  expect(laws.length).toBeGreaterThanOrEqual(3);
});

// OpenStax, Chemistry 2e, section 12.4 (see the file); the source draws unweighted lines.
test.each(laws.map((set) => [set.id, set] as const))("%s", (_, set) => {
  const run = makeRun({
    times: set.data.time,
    timeUnit: set.units.time,
    values: set.data.concentration,
  });
  [0, 1, 2].forEach((order, i) => {
    const line = linearize(run, { order, weights: "equal" });
    expect(line.rSquared).toBeCloseTo(set.recomputed.r2ByOrder[i], 8);
  });
  const line = linearize(run, { order: set.recomputed.order, weights: "equal" });
  const unit = set.recomputed.order === 1 ? `1/${set.units.time}` : `L/(mol ${set.units.time})`;
  expect(correctDigits(line.rateConstant.in(unit).value, set.recomputed.k)).toBeGreaterThan(8);
});

describe("crystal violet, ln line", () => {
  const set = reference<{
    sets: { data: { time: number[]; absorbance: number[] }; recomputed: Record<string, unknown> }[];
  }>("crystal_violet.json").sets[0];
  const run = makeRun({
    times: set.data.time,
    timeUnit: "min",
    values: set.data.absorbance,
    unit: "AU",
  });

  // Colby College, physical chemistry, Example 3.2.1: k moves with the end value that is assumed.
  test.each([["0.036"], ["0.040"], ["0.044"]])("end value %s, equal weights", (end) => {
    const expected = set.recomputed[`lnLineEndValue${end}`] as { unweighted: number };
    const line = linearize(run, { endValue: Number(end), weights: "equal" });
    expect(correctDigits(line.rateConstant.in("1/min").value, expected.unweighted))
      .toBeGreaterThan(6);
  });

  test("weights (A − A∞)² by default", () => {
    const expected = set.recomputed["lnLineEndValue0.040"] as { weightedBySignalSquared: number };
    const line = linearize(run, { endValue: 0.04 });
    expect(correctDigits(line.rateConstant.in("1/min").value, expected.weightedBySignalSquared))
      .toBeGreaterThan(6);
  });
});

test("weights are those that the transformation demands: c²ⁿ", () => {
  const values = [0.1, 0.05, 0.02, 0.01];
  const run = makeRun({ times: [0, 10, 20, 30], values });
  for (const order of [0, 1, 1.5, 2]) {
    const { weights } = linearize(run, { order });
    values.forEach((c, i) => expect(weights[i]).toBeCloseTo((c / 0.1) ** (2 * order), 12));
  }
});

test("a line through exact data of any order gives k and its unit", () => {
  const times = [0, 10, 20, 40, 80];
  const half = times.map((t) => (0.1 ** -0.5 + 0.5 * 0.2 * t) ** -2); // order 1.5, k = 0.2
  const line = linearize(makeRun({ times, values: half }), { order: 1.5 });
  expect(correctDigits(line.rateConstant.value, 0.2)).toBeGreaterThan(9);
  expect(line.rateConstant.unit).toBe("(mol/L)^-0.5 s⁻¹");
});

describe("readings that have no logarithm", () => {
  const run = makeRun({ times: [0, 1, 2, 3, 4], values: [0.5, 0.3, 0.1, 0.02, -0.01], unit: "AU" });

  test("are left out of the picture with a caution that names them", () => {
    const line = linearize(run);
    expect(line.times.length).toBe(4);
    expect(line.cautions[0]).toMatchObject({ code: "points-cannot-be-drawn" });
    expect(line.cautions[0].message).toContain("at t = 4");
  });

  test("and refused where too few remain", () => {
    expect(() => linearize(run, { endValue: 0.2 })).toThrow(/only 2 readings.*end value 0\.2/);
  });
});
