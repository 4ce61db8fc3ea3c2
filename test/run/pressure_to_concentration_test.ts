import { describe, expect, test } from "vitest";
import { Estimate } from "../../lib/quantity/estimate.ts";
import {
  type PressureOptions,
  pressureToConcentration,
} from "../../lib/run/pressure_to_concentration.ts";
import { Run } from "../../lib/run/run.ts";
import { reference } from "../reference/reference.ts";

const make = (values: number[], unit = "kPa", more = {}) =>
  new Run({
    id: "7",
    temperature: 600,
    times: values.map((_, i) => 100 * i),
    signals: [{ name: "pressure", unit, values, ...more }],
  });

// test/reference/total_pressure.json: a printed examination problem, source there.
test("A → B + C: the rate constant of the printed problem", () => {
  const { sets: [set] } = reference<{
    sets: {
      data: { time: number[]; totalPressure: number[] };
      recomputed: { k: number };
      publishedResult: { k: number };
    }[];
  }>("total_pressure.json");
  const run = make(set.data.totalPressure, "atm").with({ times: set.data.time });
  const [start, later] = pressureToConcentration(run, {
    reactant: "A",
    stoichiometry: { A: -1, B: 1, C: 1 },
  }).signal("A").values;
  const k = Math.log(start / later) / set.data.time[1];
  expect(Math.abs(k / set.recomputed.k - 1)).toBeLessThan(1e-9);
  expect(Math.abs(k / set.publishedResult.k - 1)).toBeLessThan(5e-4);
});

// Molar volume of the ideal gas at 273.15 K and 101.325 kPa, 22.413 969 54 L/mol: CODATA 2018.
test("the concentration at the start is the reciprocal of the molar volume", () => {
  const run = make([1, 1.5], "atm").with({ temperature: "0 °C" });
  const { values } = pressureToConcentration(run, {
    reactant: "A",
    stoichiometry: { A: -1, B: 1, C: 1 },
  }).signal("A");
  expect(1 / values[0]).toBeCloseTo(22.41396954, 7);
});

describe("p = p(0)[1 + (n − 1) x]: the reactant is gone at n p(0) and half gone half way", () => {
  test.each([
    [{ A: -1, B: 2 }, [40, 60, 80]],
    [{ A: -1, B: 1, C: 1, D: 1 }, [40, 80, 120]],
    [{ A: -2, B: 1 }, [40, 30, 20]],
    [{ A: -2, B: 4, C: 1 }, [40, 70, 100]],
    [{ A: -1, B: 0.5 }, [40, 30, 20]],
  ])("%j", (stoichiometry, pressures) => {
    const { values } = pressureToConcentration(make(pressures), { reactant: "A", stoichiometry })
      .signal("A");
    expect(values[0] * 8.31446261815324 * 600).toBeCloseTo(40, 10); // kPa = J/L
    expect(values[1] / values[0]).toBeCloseTo(0.5, 12);
    expect(values[2] / values[0]).toBeCloseTo(0, 12);
  });
});

test("several reactants and an inert gas: what the reactant began with has to be given", () => {
  const options: PressureOptions = {
    reactant: "B",
    stoichiometry: { A: -2, B: -1, C: 2 },
  };
  const run = make([100, 90]);
  expect(() => pressureToConcentration(run, options)).toThrow(
    /several reactants.*reactantPressure/,
  );
  const { values } = pressureToConcentration(run, { ...options, reactantPressure: "20 kPa" })
    .signal("B");
  // 10 kPa less are 10 kPa of B used up (Σν = −1), of 20 kPa.
  expect(values[1] / values[0]).toBeCloseTo(0.5, 12);
});

test("a run that was not read at t = 0 needs the pressure at the start", () => {
  const late = make([50, 60]).with({ times: [10, 20] });
  const options = { reactant: "A", stoichiometry: { A: -1, B: 2 } };
  expect(() => pressureToConcentration(late, options)).toThrow(/no reading at t = 0/);
  const { values } = pressureToConcentration(late, { ...options, initialPressure: "40 kPa" })
    .signal("A");
  expect(values[0] / values[1]).toBeCloseTo(30 / 20, 12);
});

describe("uncertainty", () => {
  const converted = pressureToConcentration(
    make([50, 60], "kPa", { standardUncertainties: [0.1, 0.1] }).with({ times: [10, 20] }),
    {
      reactant: "A",
      stoichiometry: { A: -1, B: 2 },
      temperature: new Estimate({ value: 600, standardError: 3, unit: "K" }),
      initialPressure: new Estimate({ value: 40, standardError: 0.2, unit: "kPa" }),
    },
  );
  const signal = converted.signal("A");
  const perPascal = 1e-3 / (8.31446261815324 * 600);

  test("of a reading is that of its pressure alone", () => {
    expect(signal.standardUncertainties![0]).toBeCloseTo(100 * perPascal, 15);
  });

  test("of temperature and start is shared", () => {
    const causes = new Map(signal.sharedUncertainties!.map(({ from, values }) => [from, values]));
    expect(causes.get("temperature")![1]).toBeCloseTo(-0.005 * signal.values[1], 15);
    // p_A = 2 p(0) − p, so one pascal at the start is two of A.
    expect(causes.get("pressure at the start")![1]).toBeCloseTo(2 * 200 * perPascal, 15);
  });

  test("and what was assumed are told", () => {
    expect(converted.cautions.map((caution) => caution.code))
      .toEqual(["ideal-gas", "shared-uncertainty"]);
  });
});

describe("what cannot be converted is refused", () => {
  const good = { reactant: "A", stoichiometry: { A: -1, B: 2 } };
  const cold = make([40, 60]).with({ temperature: undefined });
  test.each<[string, Run, object, RegExp]>([
    ["no reactant", make([40]), { stoichiometry: {} }, /without the reactant/],
    ["no stoichiometry", make([40]), { reactant: "A" }, /without the stoichiometry/],
    ["a product", make([40]), { ...good, reactant: "B" }, /"B" by pressure: its .* number is 2/],
    ["a stranger", make([40]), { ...good, reactant: "toString" }, /number is 0/],
    ["no change of pressure", make([40]), {
      reactant: "A",
      stoichiometry: { A: -1, B: 1 },
    }, /Σν = 0/],
    ["no temperature", cold, good, /temperature is not known/],
    ["no pressure", make([1], "mmol/L"), good, /for a pressure: its unit is mmol\/L/],
    [
      "more of A than there is",
      make([40]),
      { ...good, reactantPressure: "50 kPa" },
      /50000 Pa in a/,
    ],
  ])("%s", (_, run, options, message) => {
    expect(() => pressureToConcentration(run, options as PressureOptions)).toThrow(message);
  });
});
