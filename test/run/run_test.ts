import { describe, expect, test } from "vitest";
import { Run, type RunInput } from "../../lib/run/run.ts";

const input: RunInput = {
  id: "7",
  temperature: "25 °C",
  initialConcentrations: { ester: "10 mmol/L" },
  properties: { pH: 7.4, operator: "N. N." },
  times: { values: [0, 5, 5, 10], unit: "min" },
  signals: [{
    name: "ester",
    unit: "mmol/L",
    values: [10, null, 7.8, NaN],
    standardUncertainties: [0.1, NaN, 0.1, NaN],
    censored: [{ index: 3, text: "<0.5", limit: 0.5 }],
  }],
};
const run = new Run(input);

test("a run is kept in s, mol/L and K", () => {
  expect(run.temperature).toBe(298.15);
  expect([...run.times]).toEqual([0, 300, 300, 600]);
  expect(run.initialConcentrations).toEqual({ ester: 0.01 });
  const signal = run.signal();
  expect(signal).toMatchObject({ quantity: "concentration", unit: "mol/L", shownUnit: "mmol/L" });
  expect([...signal.values]).toEqual([0.01, NaN, 0.0078, NaN]);
  expect([...signal.standardUncertainties!]).toEqual([1e-4, NaN, 1e-4, NaN]);
  expect(signal.censored).toEqual([{ index: 3, text: "<0.5", limit: 0.0005 }]);
});

test("bare numbers are in canonical units", () => {
  const plain = new Run({
    id: "1",
    temperature: 300,
    initialConcentrations: { A: 0.1 },
    times: [0, 1],
    signals: [{ name: "A", unit: "mol/L", values: new Float64Array([0.1, 0.05]) }],
  });
  expect(plain.temperature).toBe(300);
  expect([...plain.times]).toEqual([0, 1]);
  expect([...plain.signal("A").values]).toEqual([0.1, 0.05]);
});

describe("what a signal measures follows from its unit", () => {
  test.each([
    ["A590", "1", "absorbance", "1"],
    ["signal", "mAU", "absorbance", "1"],
    ["cell", "kPa", "pressure", "Pa"],
    ["label claim", "%", "fraction", "1"],
    ["ester", "µmol/L", "concentration", "mol/L"],
    ["NO2", "molecule/cm3", "concentration", "mol/L"],
    ["peak area", "1", "other", "1"],
    ["mass", "g", "other", "g"],
  ])("%s [%s] is %s in %s", (name, unit, quantity, canonical) => {
    const signal = run.with({ signals: [{ name, unit, values: [1, 2, 3, 4] }] }).signal();
    expect(signal).toMatchObject({ quantity, unit: canonical });
  });
});

test("several signals have to be named", () => {
  const two = run.with({
    signals: [...run.signals, { name: "acid", unit: "mmol/L", values: [0, 1, 2, 3] }],
  });
  expect(two.signal("acid").values[3]).toBe(0.003);
  expect(() => two.signal()).toThrow(/run "7": there are "ester", "acid"/);
  expect(() => two.signal("base")).toThrow(/"base" in run "7": there are "ester", "acid"/);
});

describe("leaving readings out", () => {
  const without = run.without([2, 0], "bubble in the cell");

  test("keeps them listed with the reason, in order", () => {
    expect(without.exclusions.map((e) => e.index)).toEqual([0, 2]);
    expect([...without.times]).toEqual([...run.times]);
    expect([...without.signal().values]).toEqual([...run.signal().values]);
    expect(without.isExcluded(2)).toBe(true);
    expect(without.isExcluded(1)).toBe(false);
  });

  test("is never silent", () => {
    expect(without.cautions[0]).toMatchObject({ code: "readings-excluded", subject: "7" });
    expect(String(without)).toMatch(/reading 2 at t = 300\.0 s \(bubble in the cell\)/);
    expect(without.with({ id: "8" }).cautions).toHaveLength(1);
  });

  test("leaves the run itself as it was", () => expect(run.exclusions).toEqual([]));

  test.each([
    [[4], "late", /reading 4 of run "7": its readings are 0 to 3/],
    [[-1], "late", /reading -1/],
    [[0.5], "late", /reading 0\.5/],
    [[0], " ", /without a reason/],
  ])("%j for %j is refused", (indices, reason, message) => {
    expect(() => run.without(indices, reason)).toThrow(message);
  });
});

describe("a run that contradicts itself is refused", () => {
  test.each<[string, Partial<RunInput>, RegExp]>([
    ["no id", { id: "" }, /without an id/],
    ["time backwards", { times: [0, 2, 1, 3] }, /backwards at reading 2, from 2 to 1 s/],
    ["time not finite", { times: [0, NaN, 1, 2] }, /time 1 is NaN/],
    [
      "time of another unit",
      { times: { values: [0, 1, 2, 3], unit: "K" } },
      /Cannot convert K to s/,
    ],
    ["lengths", { times: [0, 1, 2] }, /"ester" has 4 values and the run has 3 times/],
    [
      "lengths of input",
      { signals: [{ name: "A", unit: "1", values: [1] }] },
      /1 values and the run has 4/,
    ],
    ["temperature", { temperature: "-300 °C" }, /at -26\.8.* K/],
    ["a temperature unit", { temperature: "25 C" }, /"C" is not known/],
    ["concentration", { initialConcentrations: { A: -1 } }, /"A" is -1 mol\/L/],
    ["a value that is text", {
      signals: [{ name: "A", unit: "1", values: [1, 2, 3, "4" as unknown as number] }],
    }, /value 3 is "4"/],
    [
      "an infinite value",
      { signals: [{ name: "A", unit: "1", values: [1, 2, 3, Infinity] }] },
      /value 3/,
    ],
    ["an uncertainty of 0", {
      signals: [{
        name: "A",
        unit: "1",
        values: [1, 2, 3, 4],
        standardUncertainties: [1, 1, 0, 1],
      }],
    }, /uncertainty of value 2 is 0/],
    ["two signals of one name", { signals: [...run.signals, ...run.signals] }, /called "ester"/],
  ])("%s", (_, changes, message) => {
    expect(() => run.with(changes)).toThrow(message);
  });
});

test("a run shows its facts and readings, censored ones as they were written", () => {
  const text = String(run.without([0], "spilt"));
  expect(text).toMatch(/Run 7, 4 readings/);
  expect(text).toMatch(/298\.15 K/);
  expect(text).not.toMatch(/not shown/);
  expect(text).toMatch(/time \/ s +ester \/ \(mol\/L\) +u\(ester\) \/ \(mol\/L\) +left out/);
  expect(text).toMatch(/^ +0 +0\.01000 +1\.0×10⁻⁴ +spilt$/m);
  expect(text).toMatch(/^ +600 +<0\.5 +–$/m);
  expect(JSON.parse(JSON.stringify(run))).toMatchObject({
    temperature: 298.15,
    pH: 7.4,
    readings: [{ time: 0, ester: 0.01, "u(ester)": 1e-4 }, {}, {}, { time: 600, ester: "<0.5" }],
  });
});

test("a long run shows its ends and says so; its data are complete", () => {
  const values = Array.from({ length: 500 }, (_, i) => i);
  const long = new Run({ id: "1", times: values, signals: [{ name: "A", unit: "1", values }] });
  expect(String(long).split("\n").length).toBeLessThan(50);
  expect(String(long)).toMatch(/460 readings between 19 s and 480 s are not shown/);
  const { readings } = JSON.parse(JSON.stringify(long));
  expect(readings).toHaveLength(500);
  expect(readings[250]).toEqual({ time: 250, A: 250 });
});
