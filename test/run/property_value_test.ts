import { expect, test } from "vitest";
import { propertyReader } from "../../lib/run/property_value.ts";

test.each(
  [
    [["7.4", "8.1"], ".", 7.4],
    [["7,4", ""], ",", 7.4],
    [["12", "13"], ".", 12],
    [["7.40", "7.00"], ".", 7.4],
    [["007", "008"], ".", "007"],
    [["1.1", "1.10"], ".", "1.1"],
    [["7.4", "unknown"], ".", "7.4"],
    [["7,4"], ".", "7,4"],
    [["12345678901234567890"], ".", "12345678901234567890"],
  ] as const,
)("%j with the mark %s: the first is %j", (cells, mark, first) => {
  expect(propertyReader(cells, mark)(cells[0])).toBe(first);
});
