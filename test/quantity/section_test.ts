import { describe, expect, test } from "vitest";
import { Estimate } from "../../lib/quantity/estimate.ts";
import { cellJson, cellText } from "../../lib/quantity/section.ts";

const estimate = new Estimate({ value: 83.14, standardError: 0.62, unit: "kJ/mol" });

describe("a cell as a reader sees it", () => {
  test.each([
    [null, undefined, "–"],
    ["first order", undefined, "first order"],
    [12, undefined, "12"],
    [-12, "s", "−12 s"],
    [0, undefined, "0"],
    [1.23456789, "mol/L", "1.235 mol/L"],
    [1e7, undefined, "1.000×10⁷"],
    [0.5, "1", "0.5000"],
    [NaN, undefined, "not determined"],
    [estimate, undefined, "83.14 ± 0.62 kJ/mol"],
    [{ value: 0.25, text: "a quarter" }, undefined, "a quarter"],
  ])("%o in %s", (cell, unit, expected) => {
    expect(cellText(cell, unit)).toBe(expected);
  });
});

describe("a cell as data", () => {
  test("numbers and words stay, what is not finite becomes null", () => {
    expect([1.5, "a", null, NaN, Infinity, -Infinity].map(cellJson))
      .toEqual([1.5, "a", null, null, null, null]);
  });

  test("a number with its own text stays the number", () => {
    expect(cellJson({ value: 0.25, text: "a quarter" })).toBe(0.25);
    expect(cellJson({ value: NaN, text: "none" })).toBeNull();
  });

  test("an estimate becomes its plain data", () => {
    expect(cellJson(estimate)).toEqual(estimate.toJSON());
  });
});
