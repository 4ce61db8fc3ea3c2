import { describe, expect, test } from "vitest";
import fc from "fast-check";
import {
  decimalExponent,
  formatNonFinite,
  formatNumber,
  formatWithUncertainty,
  superscript,
} from "../../lib/quantity/number_format.ts";

const FIGURES = "⁰¹²³⁴⁵⁶⁷⁸⁹";

/** Reads back what the library writes: `−1.23×10⁻⁷`. */
function readBack(text: string): number {
  const [mantissa, power] = text.replaceAll("−", "-").split("×10");
  if (power === undefined) return Number(mantissa);
  const plain = [...power].map((c) => c === "⁻" ? "-" : FIGURES.indexOf(c)).join("");
  return Number(`${mantissa}e${plain}`);
}

describe("formatNumber", () => {
  test.each([
    [0.00123, 4, "0.001230"],
    [12.34, 3, "12.3"],
    [1.23e-7, 3, "1.23×10⁻⁷"],
    [-0.5, 2, "−0.50"],
    [0, 4, "0"],
    [-0, 4, "0"],
    [999999.7, 4, "1.000×10⁶"],
    [999949, 4, "999900"],
    [0.99996, 4, "1.000"],
    [0.00099996, 4, "0.001000"],
    [0.00099994, 4, "9.999×10⁻⁴"],
    [1234.5, 1, "1000"],
    [5e-324, 4, "4.941×10⁻³²⁴"],
    [Number.MAX_VALUE, 4, "1.798×10³⁰⁸"],
    [0.29020 / 60, 5, "0.0048367"],
    [NaN, 4, "not determined"],
    [Infinity, 4, "∞"],
    [-Infinity, 4, "−∞"],
  ])("%d to %d digits", (value, digits, expected) => {
    expect(formatNumber(value, digits)).toBe(expected);
  });

  test("what is written is the number to within half a unit of the last digit", () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1e308, max: 1e308, noNaN: true }),
        fc.integer({ min: 1, max: 15 }),
        (value, digits) => {
          const error = Math.abs(readBack(formatNumber(value, digits)) - value);
          const half = 0.5 * 10 ** (1 - digits) * Math.abs(value);
          // Numbers below 1e-307 have fewer digits themselves.
          expect(error <= half * (1 + 1e-9) || Math.abs(value) < 1e-307).toBe(true);
        },
      ),
      { numRuns: 2000 },
    );
  });
});

describe("formatWithUncertainty gives two digits of uncertainty and the value to the same place", () => {
  test.each([
    // The rule: JCGM 100:2008 (GUM), 7.2.6. Expected texts by hand.
    [83.142, 0.624, "83.14 ± 0.62"],
    [0.29020, 0.00192, "0.2902 ± 0.0019"],
    [12.34, 0.0996, "12.34 ± 0.10"],
    [123.4, 9.96, "123 ± 10"],
    [123.4, 9.94, "123.4 ± 9.9"],
    [123.4, 0.996, "123.4 ± 1.0"],
    [9.9999, 0.012, "10.000 ± 0.012"],
    [0, 0.0123, "0.000 ± 0.012"],
    [0, 12, "0 ± 12"],
    [0, 123, "(0.0 ± 1.2)×10²"],
    [-5.4321, 0.012, "−5.432 ± 0.012"],
    [-0.0001, 0.12, "0.00 ± 0.12"],
    [0.00001, 1, "0.0 ± 1.0"],
    [5, 12345, "(0.0 ± 1.2)×10⁴"],
    [123456, 1234, "(1.235 ± 0.012)×10⁵"],
    [1234567, 89, "(1.234567 ± 0.000089)×10⁶"],
    [999999.6, 12, "(1.000000 ± 0.000012)×10⁶"],
    [0.00099999, 0.0000012, "0.0010000 ± 0.0000012"],
    [4.8367e-3, 3.2e-5, "0.004837 ± 0.000032"],
    [4.8367e-4, 3.2e-6, "(4.837 ± 0.032)×10⁻⁴"],
    [1e300, 1e298, "(1.000 ± 0.010)×10³⁰⁰"],
    [-1e-300, 1e-302, "(−1.000 ± 0.010)×10⁻³⁰⁰"],
    [1e-320, 1e-321, "(1.00 ± 0.10)×10⁻³²⁰"],
    [1.7e308, 1e308, "(1.7 ± 1.0)×10³⁰⁸"],
    // CODATA 2018 Newtonian constant of gravitation, in m³/(kg s²).
    [6.67430e-11, 0.00015e-11, "(6.67430 ± 0.00015)×10⁻¹¹"],
  ])("%d ± %d", (value, uncertainty, expected) => {
    expect(formatWithUncertainty(value, uncertainty)).toBe(expected);
  });

  test("the uncertainty is never written as 0, and always with two digits", () => {
    const magnitude = fc.tuple(
      fc.double({ min: 1, max: 9.999, noNaN: true }),
      fc.integer({ min: -20, max: 20 }),
    ).map(([m, e]) => m * 10 ** e);
    fc.assert(
      fc.property(magnitude, magnitude, (value, uncertainty) => {
        fc.pre(value / uncertainty < 1e12); // beyond, the figures of a double are spent
        const text = formatWithUncertainty(value, uncertainty);
        const [, first, second, power] = /^\(?(\S+) ± ([^\s)]+)\)?(?:×10(\S+))?$/.exec(text)!;
        expect(second.replace(".", "").replace(/^0+/, "")).toMatch(/^[1-9]\d$/);
        const place = (t: string) => (t.split(".")[1] ?? "").length;
        expect(place(first)).toBe(place(second));
        const tail = power ? `×10${power}` : "";
        const u = readBack(`${second}${tail}`);
        expect(Math.abs(u / uncertainty - 1)).toBeLessThan(0.05 + 1e-9);
        expect(Math.abs(readBack(`${first}${tail}`) - value)).toBeLessThanOrEqual(0.051 * u);
      }),
      { numRuns: 2000 },
    );
  });
});

test("decimalExponent is the exponent of the leading digit", () => {
  fc.assert(fc.property(
    fc.integer({ min: -300, max: 300 }),
    fc.constantFrom(-9.99, -1, 1, 3.3, 9.99),
    (exponent, mantissa) => {
      expect(decimalExponent(Number(`${mantissa}e${exponent}`))).toBe(exponent);
    },
  ));
});

test("superscript writes signs, figures and the decimal point", () => {
  expect(superscript(-3)).toBe("⁻³");
  expect(superscript(0)).toBe("⁰");
  expect(superscript(0.5)).toBe("⁰·⁵");
});

test("numbers that are not finite are named in words", () => {
  expect([NaN, Infinity, -Infinity].map(formatNonFinite)).toEqual(["not determined", "∞", "−∞"]);
});
