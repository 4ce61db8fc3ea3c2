import { expect, test } from "vitest";
import { sectionsText } from "../../lib/quantity/section_text.ts";

test("values are aligned under one another, remarks behind them", () => {
  expect(sectionsText([{
    kind: "values",
    title: "Fit",
    rows: [
      { key: "k", label: "k", value: 2, unit: "s" },
      { key: "long", label: "half-life", value: 15, unit: "s", note: "by k" },
    ],
  }])).toEqual(["Fit", "  k           2 s", "  half-life   15 s   (by k)"]);
});

test("a table has its heads above its columns", () => {
  const lines = sectionsText([{
    kind: "table",
    key: "t",
    columns: [{ key: "run", label: "run" }, { key: "k", label: "k [s⁻¹]" }],
    rows: [["first", 12345], ["2", null]],
  }]);
  expect(lines).toEqual(["  run     k [s⁻¹]", "  first   12345", "  2       –"]);
});

test("a combining mark takes no room", () => {
  const lines = sectionsText([{
    kind: "values",
    rows: [{ key: "a", label: "n̄", value: 1 }, { key: "b", label: "n", value: 2 }],
  }]);
  const column = (line: string) => [...line.replaceAll(/\p{M}/gu, "")].length;
  expect(column(lines[0])).toBe(column(lines[1]));
});

test("statements and equations are lines of their own", () => {
  expect(sectionsText([
    { kind: "statement", key: "verdict", text: "First order." },
    { kind: "equation", key: "law", latex: "v = k[A]", text: "v = k[A]" },
  ])).toEqual(["First order.", "  v = k[A]"]);
});
