import { expect, test } from "vitest";
import { formatCaution, RefusedError } from "../../lib/quantity/caution.ts";

const caution = {
  code: "temperature-span",
  severity: "serious",
  message: "Only 6 K were covered",
} as const;

test.each(
  [
    ["note", "Note: Only 6 K were covered"],
    ["caution", "Caution: Only 6 K were covered"],
    ["serious", "Serious caution: Only 6 K were covered"],
  ] as const,
)("a %s is one line with its weight in front", (severity, expected) => {
  expect(formatCaution({ ...caution, severity })).toBe(expected);
});

test("a refusal carries its caution and says the same", () => {
  const error = new RefusedError(caution);
  expect(error).toBeInstanceOf(RangeError);
  expect(error.name).toBe("RefusedError");
  expect(error.caution).toBe(caution);
  expect(error.message).toBe(caution.message);
});
