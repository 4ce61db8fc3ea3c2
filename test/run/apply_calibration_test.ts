import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { Estimate } from "../../lib/quantity/estimate.ts";
import { applyCalibration, type CalibrationOptions } from "../../lib/run/apply_calibration.ts";
import { Run } from "../../lib/run/run.ts";
import { sharedStandardUncertainty } from "../../lib/run/shared_uncertainty.ts";

const areas = (values: number[], unit = "1") =>
  new Run({
    id: "7",
    times: values.map((_, i) => i),
    signals: [{
      name: "peak area",
      unit,
      values,
      standardUncertainties: values.map(() => 20),
      censored: [],
    }],
  });
const slope = new Estimate({ value: 2e5, standardError: 2e3, unit: "L/mol" });
const intercept = new Estimate({ value: 100, standardError: 10, unit: "1" });

test("concentration is (S − intercept)/slope", () => {
  const converted = applyCalibration(areas([2100, 1100, 60]), { species: "A", slope, intercept });
  expect([...converted.signal("A").values]).toEqual([0.01, 0.005, -0.0002]);
  expect([...converted.signal().standardUncertainties!]).toEqual([1e-4, 1e-4, 1e-4]);
});

// The calibration line of JCGM 100:2008 (GUM), annex H.3.4: intercept −0.1712 (0.0029), slope 0.00218
// (0.00067), correlation −0.930, gives −0.1494 with u = 0.0041 at 10 units of x. Values from memory.
// Read backwards, the error that the line contributes at x = 10 is u/slope.
test("the shared uncertainty agrees with the calibration line of the GUM", () => {
  const line = {
    species: "x",
    slope: new Estimate({ value: 0.00218, standardError: 0.00067, unit: "L/mol" }),
    intercept: new Estimate({ value: -0.1712, standardError: 0.0029, unit: "1" }),
  };
  for (const how of [{ correlation: -0.93 }, { covariance: -0.93 * 0.00067 * 0.0029 }]) {
    const signal = applyCalibration(areas([-0.1494]), { ...line, ...how }).signal();
    expect(signal.values[0]).toBeCloseTo(10, 9);
    expect(sharedStandardUncertainty(signal)[0] * 0.00218).toBeCloseTo(0.0041, 4);
  }
});

test("causes that are kept apart give the covariance of any two values", () => {
  fc.assert(fc.property(
    fc.double({ min: -1, max: 1, noNaN: true }),
    fc.double({ min: 10, max: 5000, noNaN: true }),
    fc.double({ min: 10, max: 5000, noNaN: true }),
    (correlation, first, second) => {
      const signal = applyCalibration(areas([first, second]), {
        species: "A",
        slope,
        intercept,
        correlation,
      }).signal();
      const [c1, c2] = signal.values;
      const [ua, ub, b] = [10, 2e3, 2e5];
      // cov(cᵢ, cⱼ) = [u²(a) + cᵢ cⱼ u²(b) + (cᵢ + cⱼ) cov(a, b)]/b², from c = (S − a)/b.
      const expected = (ua ** 2 + c1 * c2 * ub ** 2 + (c1 + c2) * correlation * ua * ub) / b ** 2;
      const ours = (signal.sharedUncertainties ?? [])
        .reduce((sum, { values }) => sum + values[0] * values[1], 0);
      expect(Math.abs(ours - expected)).toBeLessThan(
        1e-12 * (ua ** 2 + (0.025 * ub) ** 2) / b ** 2,
      );
    },
  ));
});

test("a slope of another unit is converted, for a signal in any unit", () => {
  const one = applyCalibration(areas([2100]), {
    species: "A",
    slope: "200 L/mmol",
    intercept: 100,
  });
  expect(one.signal().values[0]).toBeCloseTo(0.01, 15);
  const pressure = applyCalibration(areas([30], "kPa"), {
    species: "A",
    slope: "2 MPa L/mol",
    intercept: "10 kPa",
  });
  expect(pressure.signal().values[0]).toBeCloseTo(0.01, 15);
  const mass = applyCalibration(areas([30], "mg"), { species: "A", slope: "3 g L/mol" });
  expect(mass.signal().values[0]).toBeCloseTo(0.01, 15);
});

test("an exact calibration shares nothing; a reading below a limit stays one", () => {
  const run = areas([2100, NaN]).with({
    signals: [{
      name: "area",
      unit: "1",
      values: [2100, NaN],
      censored: [{ index: 1, text: "<200", limit: 200 }],
    }],
  });
  const rising = applyCalibration(run, { species: "A", slope: 2e5, intercept: 100 });
  expect(rising.signal().sharedUncertainties).toEqual([]);
  expect(rising.cautions).toEqual([]);
  expect(rising.signal().censored).toEqual([{ index: 1, text: "<200", limit: 0.0005 }]);
  const falling = applyCalibration(run, { species: "A", slope: -2e5, intercept: 100 });
  expect(falling.signal().censored).toEqual([{ index: 1, text: "<200" }]);
  expect(falling.signal().values[1]).toBeNaN();
});

test("readings outside the standards raise a caution with their number", () => {
  const range: CalibrationOptions["range"] = ["1 mmol/L", "8 mmol/L"];
  const converted = applyCalibration(areas([2100, 1100, 60]), {
    species: "A",
    slope: 2e5,
    intercept: 100,
    range,
  });
  expect(converted.cautions).toMatchObject([{
    code: "calibration-range",
    severity: "caution",
    message: expect.stringMatching(/^2 of 3 readings of "A" in run "7"/),
  }]);
  const inside = applyCalibration(areas([1100]), { species: "A", slope: 2e5, range });
  expect(inside.cautions).toEqual([]);
});

describe("what cannot be used is refused", () => {
  test.each<[object, RegExp]>([
    [{ intercept }, /without its slope/],
    [{ slope: 0 }, /slope 0/],
    [{ slope: "2e5 L/s" }, /expected/],
    [{ slope, intercept, covariance: 2.1e4 }, /covariance 21000 .* between -20000 and 20000/],
    [{ slope, intercept, correlation: 1.1 }, /between -1 and 1/],
    [{ slope, intercept, correlation: 0, covariance: 0 }, /both/],
    [{ slope, range: [2, 1] }, /\[2, 1\] as the range/],
    [{ slope, signal: "height" }, /signal "height"/],
  ])("%j", (options, message) => {
    expect(() => applyCalibration(areas([1]), { species: "A", ...options } as CalibrationOptions))
      .toThrow(message);
  });
});
