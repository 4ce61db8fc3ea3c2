import { describe, expect, test } from "vitest";
import fc from "fast-check";
import { readQuantity } from "../../lib/quantity/read_quantity.ts";
import { UnitError } from "../../lib/quantity/unit.ts";

test.each([
  [298.15, "K", 298.15],
  ["25 °C", "K", 298.15],
  ["−5 °C", "K", 268.15],
  ["90 min", "s", 5400],
  ["90min", "s", 5400],
  ["3 mmol/L", "mol/L", 0.003],
  ["1.5e-3 mol/L", "mol/L", 0.0015],
  [".5 h", "min", 30],
  ["5. s", "s", 5],
  ["1.2E+3 ms", "s", 1.2],
  ["0.3 1/min", "s⁻¹", 0.005],
  ["2 L/(mol s)", "L mol-1 s-1", 2],
  ["10 kcal/mol", "kJ/mol", 41.84],
  ["12", "1", 12],
  ["12 %", "1", 0.12],
])("%j in %s is %d", (input, unit, expected) => {
  expect(readQuantity(input, unit, "it")).toBeCloseTo(expected, 14);
});

describe("refusals name the quantity, what was written and what to write", () => {
  test.each([
    ["90", "s", `Cannot read time from "90": the unit is missing; write "90 s"`],
    ["1,5 s", "s", `Cannot read time from "1,5 s": write the decimal sign as a point`],
    ["1 000 s", "s", `Cannot read time from "1 000 s": write the figures of the number together`],
    ["1'000 s", "s", "write the figures of the number together"],
    ["2×10⁻³ s", "s", `Cannot read time from "2×10⁻³ s": write a power of ten as 1.5e-3`],
    ["2·10^3 s", "s", "write a power of ten as 1.5e-3"],
    ["", "s", `Cannot read time from "": write a number and its unit, such as "1.5 s"`],
    ["soon", "s", `Cannot read time from "soon": write a number and its unit`],
    ["5 mins", "s", `Cannot read time from "5 mins": the unit "mins" is not known`],
    ["25 C", "K", `Cannot read time from "25 C": the unit "C" is not known: write "°C" or "K"`],
    [
      "3 mol",
      "s",
      `Cannot read time from "3 mol": mol measures amount of substance, expected time such as "1 s"`,
    ],
  ])("%j", (input, unit, message) => {
    expect(() => readQuantity(input, unit, "time")).toThrow(message);
    expect(() => readQuantity(input, unit, "time")).toThrow(UnitError);
  });

  test.each([
    [NaN, "Cannot read time: NaN is not a finite number; write it in s"],
    [-Infinity, "Cannot read time: -Infinity is not a finite number"],
    ["1e999 s", `Cannot read time: "1e999" is too large for a number`],
    [null, "Cannot read time: expected a number in s or text with its unit, got null"],
    [true, "got boolean"],
    [[1], "got object"],
  ])("%j", (input, message) => {
    expect(() => readQuantity(input as number, "s", "time")).toThrow(message);
    expect(() => readQuantity(input as number, "s", "time")).toThrow(TypeError);
  });
});

test("a number written out with the canonical unit comes back the same", () => {
  fc.assert(fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
    expect(readQuantity(`${value} s`, "s", "time")).toBe(value + 0);
  }));
});
