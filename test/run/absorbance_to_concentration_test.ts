import { describe, expect, test } from "vitest";
import { Estimate } from "../../lib/quantity/estimate.ts";
import {
  type AbsorbanceOptions,
  absorbanceToConcentration,
} from "../../lib/run/absorbance_to_concentration.ts";
import { Run } from "../../lib/run/run.ts";
import { sharedStandardUncertainty } from "../../lib/run/shared_uncertainty.ts";

const run = new Run({
  id: "7",
  initialConcentrations: { dye: "12 µmol/L" },
  times: [0, 60, 120, 180],
  signals: [{
    name: "A590",
    unit: "AU",
    values: [0.85, 0.45, 0.03, NaN],
    standardUncertainties: [0.004, 0.004, 0.004, NaN],
    censored: [{ index: 3, text: "<0.02", limit: 0.02 }],
  }],
});
const exact = { molarAbsorptionCoefficient: "8e4 L/(mol cm)", pathLength: "1 cm", blank: 0.05 };
const uncertain: AbsorbanceOptions = {
  molarAbsorptionCoefficient: new Estimate({
    value: 8e4,
    standardError: 1.6e3,
    unit: "L/(mol cm)",
  }),
  pathLength: new Estimate({ value: 10, standardError: 0.05, unit: "mm" }),
  blank: new Estimate({ value: 0.05, standardError: 0.002, unit: "AU" }),
};

test("concentration is (A − blank)/(ε l), and a tail below the blank stays negative", () => {
  const signal = absorbanceToConcentration(run, exact).signal("dye");
  expect(signal).toMatchObject({ quantity: "concentration", unit: "mol/L" });
  expect(signal.values[0]).toBeCloseTo(0.8 / 8e4, 15);
  expect(signal.values[2]).toBeCloseTo(-0.02 / 8e4, 15);
  expect(signal.values[3]).toBeNaN();
  expect(signal.censored[0].text).toBe("<0.02");
  expect(signal.censored[0].limit).toBeCloseTo(-0.03 / 8e4, 15);
});

test("units of the coefficient and the path are converted", () => {
  const same = absorbanceToConcentration(run, {
    molarAbsorptionCoefficient: "8000 m2/mol",
    pathLength: "10 mm",
    blank: "50 mAU",
  });
  const expected = absorbanceToConcentration(run, exact).signal().values;
  same.signal().values.forEach((value, i) => {
    if (Number.isNaN(expected[i])) expect(value).toBeNaN();
    else expect(value / expected[i]).toBeCloseTo(1, 12);
  });
});

describe("uncertainty", () => {
  const signal = absorbanceToConcentration(run, uncertain).signal();

  test("of a reading is its own, u(A)/(ε l), whatever the coefficient's", () => {
    expect(signal.standardUncertainties![0]).toBeCloseTo(0.004 / 8e4, 15);
    expect(signal.standardUncertainties).toEqual(
      absorbanceToConcentration(run, exact).signal().standardUncertainties,
    );
  });

  test("that is shared stands by cause, with its sign", () => {
    const causes = new Map(signal.sharedUncertainties!.map(({ from, values }) => [from, values]));
    expect([...causes.keys()]).toEqual(["molar absorption coefficient", "path length", "blank"]);
    expect(causes.get("molar absorption coefficient")![0]).toBeCloseTo(-0.02 * 1e-5, 15);
    expect(causes.get("path length")![0]).toBeCloseTo(-0.005 * 1e-5, 15);
    expect(causes.get("blank")![0]).toBeCloseTo(-0.002 / 8e4, 15);
    expect(causes.get("blank")![2]).toBe(causes.get("blank")![0]);
  });

  // The law of propagation of uncertainty, JCGM 100:2008 (GUM), eq. (10), with numerical derivatives.
  test("of both kinds together is that of the law of propagation", () => {
    const inputs = [0.85, 8e4, 1, 0.05];
    const u = [0.004, 1.6e3, 0.005, 0.002];
    const c = ([A, e, l, blank]: number[]) => (A - blank) / (e * l);
    const squares = inputs.map((value, i) => {
      const h = value * 1e-6;
      const [up, down] = [h, -h].map((d) => c(inputs.map((x, j) => j === i ? x + d : x)));
      return ((up - down) / (2 * h) * u[i]) ** 2;
    });
    const total = Math.sqrt(squares.reduce((sum, square) => sum + square, 0));
    const ours = Math.hypot(signal.standardUncertainties![0], sharedStandardUncertainty(signal)[0]);
    expect(ours / total).toBeCloseTo(1, 8);
  });

  test("that is shared is told as a caution of the run; there is none if all is exact", () => {
    expect(absorbanceToConcentration(run, uncertain).cautions).toMatchObject([{
      code: "shared-uncertainty",
      subject: "7",
      message: expect.stringMatching(
        /\(molar absorption coefficient, path length, blank\), .* 2\.1 % of/,
      ),
    }]);
    expect(absorbanceToConcentration(run, exact).cautions).toEqual([]);
  });
});

test("other signals, facts and exclusions of the run stay", () => {
  const two = run.without([1], "spilt").with({
    signals: [...run.signals, { name: "pH", unit: "1", values: [7, 7, 7, 7] }],
  });
  const converted = absorbanceToConcentration(two, { ...exact, signal: "A590", species: "violet" });
  expect(converted.signals.map((signal) => signal.name)).toEqual(["violet", "pH"]);
  expect(converted.exclusions).toEqual(two.exclusions);
  expect(converted.times).toEqual(two.times);
});

describe("what cannot be converted is refused", () => {
  const unnamed = run.with({ initialConcentrations: {} });
  const pressure = run.with({ signals: [{ name: "p", unit: "kPa", values: [1, 2, 3, 4] }] });
  test.each<[string, Run, object, RegExp]>([
    ["no coefficient", run, { pathLength: 1 }, /without the molar absorption coefficient/],
    ["no path", run, { molarAbsorptionCoefficient: 8e4 }, /without the path length/],
    ["a coefficient of 0", run, { ...exact, molarAbsorptionCoefficient: 0 }, /more than 0/],
    ["another unit", run, { ...exact, pathLength: "1 s" }, /measures time/],
    ["an estimate of another unit", run, {
      ...exact,
      pathLength: new Estimate({ value: 1, standardError: 0, unit: "s" }),
    }, /Cannot convert s to cm/],
    ["an estimate without error", run, {
      ...exact,
      pathLength: new Estimate({ value: 1, standardError: NaN, unit: "cm" }),
    }, /has no standard error/],
    ["a pressure", pressure, exact, /"p" of run "7" for an absorbance: its unit is kPa/],
    ["an unnamed species", unnamed, exact, /name it with the option "species"/],
    ["an unknown option", run, { ...exact, path: 1 }, /"path".*does not exist/],
  ])("%s", (_, run, options, message) => {
    expect(() => absorbanceToConcentration(run, options as AbsorbanceOptions)).toThrow(message);
  });
});
