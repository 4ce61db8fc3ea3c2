import { describe, expect, test } from "vitest";
import fc from "fast-check";
import { rateConstantUnit } from "../../lib/quantity/rate_constant_unit.ts";
import { convert, parseUnit } from "../../lib/quantity/unit.ts";

const concentrations = [
  "mol/L",
  "mmol/L",
  "µmol/L",
  "mM",
  "mol/m3",
  "mol/dm³",
  "mol/dm^3",
  "mol L⁻¹",
  "molecule/cm3",
  "molecule cm-3",
  "bar",
  "torr",
  "AU",
  "%",
  "g/L",
];
const times = ["s", "min", "h", "d"];

describe("text", () => {
  test.each([
    [0, "mol/L", "s", "mol L⁻¹ s⁻¹"],
    [1, "mol/L", "s", "s⁻¹"],
    [2, "mol/L", "s", "L mol⁻¹ s⁻¹"],
    [3, "mol/L", "s", "L² mol⁻² s⁻¹"],
    [1.5, "mol/L", "s", "(mol/L)^-0.5 s⁻¹"],
    [1, "mmol/L", "min", "min⁻¹"],
    [2, "molecule/cm3", "s", "cm³ molecule⁻¹ s⁻¹"],
    [3, "molecule/cm3", "s", "cm⁶ molecule⁻² s⁻¹"],
    [2, "mol/dm³", "s", "dm³ mol⁻¹ s⁻¹"],
    [0, "mol/dm^3", "s", "mol dm⁻³ s⁻¹"],
    [2, "mM", "min", "mM⁻¹ min⁻¹"],
    [0, "%", "d", "% d⁻¹"],
    [0, "AU", "s", "AU s⁻¹"],
    [2, "1", "s", "s⁻¹"],
  ])("order %d in %s and %s", (order, concentration, time, expected) => {
    expect(rateConstantUnit(order, { concentration, time })).toBe(expected);
  });

  test("without options it is in mol/L and s", () => {
    expect(rateConstantUnit(2)).toBe("L mol⁻¹ s⁻¹");
  });
});

/** The size that the unit must have by the dimension of k, (concentration)^(1−n)/time. */
function sizeByDefinition(order: number, concentration: string, time: string): number {
  return parseUnit(concentration).factor ** (1 - order) / parseUnit(time).factor;
}

describe("what is written can be read again and has the size that the rate law demands", () => {
  const simple = fc.tuple(fc.integer({ min: -24, max: 48 }), fc.constantFrom(1, 2, 3, 4, 12))
    .map(([n, d]) => n / d).filter((order) => Math.abs(order) <= 4);

  test("for orders that are simple fractions, exactly", () => {
    fc.assert(
      fc.property(
        simple,
        fc.constantFrom(...concentrations),
        fc.constantFrom(...times),
        (order, concentration, time) => {
          const unit = parseUnit(rateConstantUnit(order, { concentration, time }));
          const size = sizeByDefinition(order, concentration, time);
          expect(Math.abs(unit.factor / size - 1)).toBeLessThan(1e-12);
        },
      ),
      { numRuns: 500 },
    );
  });

  test("for any order to the six decimals that are written", () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1, max: 4, noNaN: true }),
        fc.constantFrom(...concentrations),
        fc.constantFrom(...times),
        (order, concentration, time) => {
          const unit = parseUnit(rateConstantUnit(order, { concentration, time }));
          const size = sizeByDefinition(order, concentration, time);
          expect(Math.abs(unit.factor / size - 1)).toBeLessThan(3e-5);
        },
      ),
      { numRuns: 500 },
    );
  });

  test("and the dimension: a rate over a concentration to the power n", () => {
    for (const order of [0, 0.5, 1, 1.5, 2, 3]) {
      const k = rateConstantUnit(order, { concentration: "mmol/L", time: "h" });
      expect(() => convert(1, parseUnit(`(mmol/L)^${1 - order}/h`), parseUnit(k))).not.toThrow();
      expect(() => convert(1, parseUnit(`(mmol/L)^${2 - order}/h`), parseUnit(k))).toThrow();
    }
  });
});

test.each([
  [NaN, {}, "Cannot give the unit of a rate constant of order NaN: write a number"],
  [Infinity, {}, "Cannot give the unit of a rate constant of order Infinity"],
  [2, { concentraton: "mM" }, `did you mean "concentration"?`],
  [2, { concentration: 5 }, `expected text`],
  [2, { concentration: "mol/X" }, `the unit "X" is not known`],
  [2, { time: "mol" }, "mol measures amount of substance, s measures time"],
])("order %d with %j is refused", (order, options, message) => {
  expect(() => rateConstantUnit(order, options as Record<string, string>)).toThrow(message);
});
