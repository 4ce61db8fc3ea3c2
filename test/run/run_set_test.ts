import { describe, expect, test } from "vitest";
import { Run } from "../../lib/run/run.ts";
import { RunSet } from "../../lib/run/run_set.ts";

const make = (id: string, temperature: number | undefined, pH = 7) =>
  new Run({
    id,
    temperature,
    properties: { pH },
    initialConcentrations: { A: 0.01 },
    times: [60, 120],
    signals: [{
      name: "A",
      unit: "mmol/L",
      values: [5, NaN],
      censored: [{ index: 1, text: "<LOQ" }],
    }],
  });
const source = { name: "runs.csv", sha256: "0123456789abcdef".repeat(4), bytes: 1234 };
const note = {
  code: "read-as-wide",
  severity: "note",
  message: "read with a column a run",
} as const;
const runs = new RunSet([make("a", 298.15), make("b", 298.1523), make("c", 308.15, 8)], [source], [
  note,
]);

test("runs are found by id, and iterated in order", () => {
  expect([...runs].map((run) => run.id)).toEqual(["a", "b", "c"]);
  expect(runs.length).toBe(3);
  expect(runs.find("c").temperature).toBe(308.15);
  expect(() => runs.find("d")).toThrow(/run "d": there are a, b, c/);
});

describe("files and notes stay with every part", () => {
  test.each([
    ["filter", runs.filter((run) => run.id === "a")],
    ["map", runs.map((run) => run.with({ temperature: 300 }))],
    ["groupBy", [...runs.groupBy("temperature").values()][0]],
  ])("%s", (_, part) => {
    expect(part.sources).toEqual([source]);
    expect(part.cautions).toContainEqual(note);
  });
});

test("runs are grouped by temperature to 0.01 K, or by anything", () => {
  const byTemperature = runs.groupBy("temperature");
  expect([...byTemperature].map(([key, group]) => [key, group.length]))
    .toEqual([["298.15", 2], ["308.15", 1]]);
  const byPH = runs.groupBy((run) => run.properties.pH);
  expect(byPH.get("8")!.runs[0].id).toBe("c");
  const without = new RunSet([make("d", undefined)]);
  expect(() => without.groupBy("temperature")).toThrow(/run "d" by temperature: it has none/);
});

test("two runs of one name, or no runs at all, are refused", () => {
  expect(() => new RunSet([make("a", 300), make("a", 310)])).toThrow(/two runs called "a"/);
  expect(() => new RunSet([{ id: "a" } as Run])).toThrow(TypeError);
});

test("cautions of the runs come with the set", () => {
  const one = runs.map((run) => run.id === "b" ? run.without([0], "spilt") : run);
  expect(one.cautions.map((caution) => caution.code)).toEqual([
    "read-as-wide",
    "readings-excluded",
  ]);
});

test("a set shows a table of its runs and the first 12 figures of the SHA-256", () => {
  const text = String(runs);
  expect(text).toMatch(/3 runs from runs\.csv/);
  expect(text).toMatch(/298\.15/);
  expect(text).toMatch(/SHA-256 0123456789ab…/);
  expect(text).not.toMatch(/0123456789abc/);
  expect(text).toMatch(/Note: read with a column a run/);
  const [first] = JSON.parse(JSON.stringify(runs)).runs;
  expect(first).toMatchObject({
    run: "a",
    readings: 2,
    firstTime: 60,
    lastTime: 120,
    belowLimit: 1,
  });
});

test("readings are rows with headers that can be read again", () => {
  expect(runs.readings()[1]).toEqual({
    run: "a",
    "temperature [K]": 298.15,
    "initial A [mol/L]": 0.01,
    pH: 7,
    "time [s]": 120,
    "A [mmol/L]": "<LOQ",
  });
});
