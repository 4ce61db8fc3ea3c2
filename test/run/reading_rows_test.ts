import fc from "fast-check";
import { expect, test } from "vitest";
import { readingRows } from "../../lib/run/reading_rows.ts";
import { Run } from "../../lib/run/run.ts";

const units = fc.constantFrom("mmol/L", "µmol/L", "torr", "atm", "%", "mAU", "molecule/cm3");
const printed = fc.tuple(fc.integer({ min: -99_999, max: 99_999 }), fc.integer({ min: 0, max: 5 }))
  .map(([figures, places]) => Number((figures / 10 ** places).toFixed(places)));

test("a reading is shown as it was written, to the last figure, whatever its unit", () => {
  fc.assert(
    fc.property(units, fc.array(printed, { minLength: 50, maxLength: 50 }), (unit, values) => {
      const signal = { name: "A", unit, values, standardUncertainties: values.map(() => 0.7) };
      const rows = readingRows([
        new Run({
          id: "1",
          times: values.map((_, i) => i),
          signals: [signal],
        }),
      ]);
      expect(rows.map((row) => row[`A [${unit}]`])).toEqual(values.map((value) => value + 0));
      expect(new Set(rows.map((row) => row[`u(A) [${unit}]`]))).toEqual(new Set([0.7]));
    }),
  );
});

test("a run shows nothing of what only another one has", () => {
  const rows = readingRows([
    new Run({ id: "1", times: [0], signals: [{ name: "A", unit: "mM", values: [1] }] }),
    new Run({
      id: "2",
      temperature: 300,
      properties: { pH: 7 },
      times: [0],
      signals: [{ name: "B", unit: "mM", values: [2] }],
    }).without([0], "late"),
  ]);
  expect(rows).toEqual([
    {
      run: "1",
      "temperature [K]": null,
      pH: null,
      "time [s]": 0,
      "A [mM]": 1,
      "B [mM]": null,
      "left out": null,
    },
    {
      run: "2",
      "temperature [K]": 300,
      pH: 7,
      "time [s]": 0,
      "A [mM]": null,
      "B [mM]": 2,
      "left out": "late",
    },
  ]);
});

test("one name for a concentration here and an absorbance there is refused", () => {
  const make = (id: string, unit: string) =>
    new Run({ id, times: [0], signals: [{ name: "A", unit, values: [1] }] });
  expect(() => readingRows([make("1", "mM"), make("2", "AU")])).toThrow(/Cannot convert/);
});
