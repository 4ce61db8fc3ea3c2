import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { decimalMark, readNumber, readNumberCell } from "../../lib/run/number_cell.ts";

const at = (text: string, line = 2) => ({
  text,
  place: { file: "f.csv", line, column: 1, header: "A [1]", cell: text },
});
const markOf = (...cells: string[]) => decimalMark(cells.map((text, i) => at(text, i + 2)));

describe("the decimal mark of a file", () => {
  test.each([
    [["1", "2"], "."],
    [["1.5", "2"], "."],
    [["12,5", "3"], ","],
    [["1,234", "0,905"], ","],
    [["1,234", "12,5"], ","],
    [["1,234", "1234,5"], ","],
    [["<0,5", "1,234"], ","],
    [["1,5e3"], ","],
    [["n.d.", "1,25"], ","],
    [["1.234", "0.9"], "."],
  ])("%j is decided by all cells together: %s", (cells, mark) => {
    expect(markOf(...cells)).toBe(mark);
  });

  test("1,234 alone may be a thousands mark and is never guessed", () => {
    expect(() => markOf("10", "1,234", "2,500")).toThrow(
      /f\.csv, line 3, column 1 \(A \[1\]\): "1,234": .*write 1\.234 or 1234.*decimal: "," or "\."/,
    );
  });

  test("both marks in one file are refused, with both cells", () => {
    expect(() => markOf("1,5", "2.5")).toThrow(/both 2\.5 and 1,5|both 1,5 and 2\.5/);
    expect(() => markOf("1,234", "2.5")).toThrow(/line 2.*both 1,234 and 2\.5 \(line 3\)/);
  });

  test("a mark that was stated is not questioned", () => {
    expect(decimalMark([at("1,234")], ",")).toBe(",");
    expect(decimalMark([at("1,234")], ".")).toBe(".");
  });
});

describe("a cell below a limit is censored, never 0", () => {
  test.each([
    "<LOQ",
    "< LOQ",
    "<LOD",
    "LOQ",
    "<",
    "n.d.",
    "nd",
    "ND",
    "N.D.",
    "n. d.",
    "BDL",
    "bql",
    "BLOQ",
    "not detected",
    "below LOQ",
  ])("%s", (text) => {
    expect(readNumberCell(at(text), ".")).toEqual({ kind: "censored", text });
  });

  test.each(
    [
      ["<0.5", ".", 0.5],
      ["< 0.5", ".", 0.5],
      ["< 0,5", ",", 0.5],
      ["<1e-3", ".", 1e-3],
    ] as const,
  )("%s keeps its limit", (text, mark, limit) => {
    expect(readNumberCell(at(text), mark)).toEqual({ kind: "censored", text, limit });
  });

  test("an empty cell is no reading", () => {
    expect(readNumberCell(at(""), ".")).toEqual({ kind: "empty" });
  });

  test.each(["<0,5", "<abc", "< 1.2.3"])(
    "%s with a decimal point is refused, not read without limit",
    (text) => {
      expect(() => readNumberCell(at(text), ".")).toThrow(/expected a number/);
    },
  );
});

describe("what is no number is refused with what to write", () => {
  test.each([
    ["abc", /"abc": expected a number with the decimal mark "\."/],
    ["NA", /leave the cell empty/],
    ["-", /leave the cell empty/],
    ["1,234.5", /marks of thousands/],
    ["1.234.567", /marks of thousands/],
    ["12 000", /without spaces/],
    ["12\u202f000", /without spaces/],
    ["23:58", /past midnight.*"time \[min\]"/],
    ["2026-05-01 00:02:10", /past midnight/],
    [">2.5", /above a limit/],
    ["0x10", /expected a number/],
    ["Infinity", /expected a number/],
    ["1e", /expected a number/],
    ["1e400", /expected a number/],
  ])("%s", (text, message) => {
    expect(() => readNumberCell(at(text), ".")).toThrow(message);
  });
});

test("a number is the same with either mark, true minus sign included", () => {
  fc.assert(fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
    const text = String(value);
    expect(readNumber(text, ".")).toBe(value);
    expect(readNumber(text.replace(".", ",").replace("-", "−"), ",")).toBe(value);
  }));
});
