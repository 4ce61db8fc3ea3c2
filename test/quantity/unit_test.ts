import { describe, expect, test } from "vitest";
import fc from "fast-check";
import {
  commensurable,
  convert,
  convertDifference,
  parseUnit,
  UnitError,
} from "../../lib/quantity/unit.ts";

const between = (value: number, from: string, to: string) =>
  convert(value, parseUnit(from), parseUnit(to));

describe("every unit of the trade is converted", () => {
  test.each([
    // BIPM, SI Brochure, 9th ed. (2019), tables 7 and 8.
    [1, "min", "s", 60],
    [1, "h", "min", 60],
    [1, "d", "h", 24],
    [3, "mmol/L", "mol/L", 0.003],
    [5, "µmol/L", "mmol/L", 0.005],
    [1, "mM", "mmol/L", 1],
    [1, "mol/m3", "mmol/L", 1],
    [1, "mol/dm3", "mol/L", 1],
    [1, "mol cm⁻³", "mol/L", 1000],
    [1, "kPa", "bar", 0.01],
    [25, "°C", "K", 298.15],
    [298.15, "K", "°C", 25],
    [1, "kJ/mol", "J/mol", 1000],
    [50, "%", "1", 0.5],
    [250, "mAU", "AU", 0.25],
    // NIST SP 811 (2008), appendix B.8.
    [1, "atm", "torr", 760],
    [1, "atm", "kPa", 101.325],
    [1, "kcal/mol", "kJ/mol", 4.184],
    [1, "cal/mol", "J/mol", 4.184],
    // N_A = 6.02214076e23 /mol, BIPM, SI Brochure, 9th ed. (2019).
    [1, "mol/L", "molecule/cm3", 6.02214076e20],
  ])("%d %s in %s is %d", (value, from, to, expected) => {
    const error = Math.abs(between(value, from, to) / expected - 1);
    expect(error).toBeLessThan(4e-16);
  });

  test("decimal multiples stay exact", () => {
    expect(between(3, "mmol/L", "mol/L")).toBe(0.003);
    expect(between(7, "nM", "mol/L")).toBe(7e-9);
    expect(between(0.1, "h", "min")).toBe(6);
  });

  test("1 torr is 133.322 Pa", () => {
    // NIST SP 811 (2008), appendix B.8: 1.333224 E+02.
    expect(between(1, "torr", "Pa")).toBeCloseTo(133.3224, 4);
  });

  test("k = 0.29020 /min is 4.8367e-3 /s", () => {
    // 0.29020/60 by hand.
    expect(between(0.29020, "min⁻¹", "s⁻¹").toExponential(4)).toBe("4.8367e-3");
  });

  test("a second-order rate constant goes to molecule-cm units", () => {
    // By hand: 1 L/(mol s) = 1000 cm³ / 6.02214076e23 molecules / s = 1.66054e-21 cm³/(molecule s).
    const k = between(1, "L mol⁻¹ s⁻¹", "cm³ molecule⁻¹ s⁻¹");
    expect(k.toExponential(8)).toBe((1000 / 6.02214076e23).toExponential(8));
    // A third-order one by the square of it.
    const k3 = between(1, "L2 mol-2 s-1", "cm6 molecule-2 s-1");
    expect(k3 / (1000 / 6.02214076e23) ** 2).toBeCloseTo(1, 14);
  });
});

describe("one unit in several spellings", () => {
  test.each([
    ["L mol⁻¹ s⁻¹", "L/(mol s)"],
    ["L mol⁻¹ s⁻¹", "L mol-1 s-1"],
    ["L mol⁻¹ s⁻¹", "L·mol^-1·s^-1"],
    ["L mol⁻¹ s⁻¹", "L mol^(-1) s^(-1)"],
    ["L mol⁻¹ s⁻¹", "L.mol-1.s-1"],
    ["L mol⁻¹ s⁻¹", "1/(M s)"],
    ["L mol⁻¹ s⁻¹", "M−1 s−1"],
    ["mol m⁻³", "mol/m3"],
    ["mol m⁻³", "mol/m^3"],
    ["cm³ molecule⁻¹ s⁻¹", "cm^3/(molecule s)"],
    ["min⁻¹", "1/min"],
    ["min⁻¹", "/min"],
    ["mol L⁻¹ s⁻¹", "mol/L/s"],
    ["(mol/L)^0.5", "(mol/L)^(1/2)"],
    ["s", "  s "],
  ])("%s is %s", (one, other) => {
    const [a, b] = [parseUnit(one), parseUnit(other)];
    expect(commensurable(a, b)).toBe(true);
    expect(b.factor / a.factor).toBeCloseTo(1, 14);
  });
});

describe("dimensions are checked", () => {
  test("minutes cannot become moles", () => {
    expect(() => between(1, "min", "mol")).toThrow(
      "Cannot convert min to mol: min measures time, mol measures amount of substance",
    );
    expect(() => convertDifference(1, parseUnit("min"), parseUnit("mol"))).toThrow(UnitError);
  });

  test("rate constants of different order cannot be converted into one another", () => {
    expect(() => between(1, "L mol⁻¹ s⁻¹", "s⁻¹")).toThrow(
      "L mol⁻¹ s⁻¹ measures second-order rate constant, s⁻¹ measures first-order rate constant",
    );
  });

  test("mass and amount concentration are different", () => {
    expect(() => between(1, "g/L", "mol/L")).toThrow("mass concentration");
  });
});

describe("what cannot be read is refused with the reason", () => {
  test.each([
    ["", `Cannot read a unit from an empty text: write "1" for a pure number`],
    ["KJ/mol", `Cannot read the unit "KJ/mol": the unit "KJ" is not known: write "kJ"`],
    ["C", `Cannot read the unit "C": the unit "C" is not known: write "°C" or "K"`],
    ["furlong/s", `Cannot read the unit "furlong/s": the unit "furlong" is not known; known are`],
    ["L/mol s", `what stands behind "/" can be read in two ways: write it like L/(mol s)`],
    ["mol/", "a unit is missing at the end"],
    ["mol·", "a unit is missing at the end"],
    ["mol//L", `"/" is not expected here`],
    ["mol/·L", `"·" is not expected here`],
    ["·mol", `"·" is not expected here`],
    ["(mol/L", `")" is missing`],
    ["mol/L)", `")" is not expected here`],
    ["()", "a unit is missing at the end"],
    ["2 s", `"2" is not expected here`],
    ["m^1/2", `"2" is not expected here`],
    ["s^", `"^" is not expected here`],
    ["s⁻", `"⁻" is no exponent`],
    ["dm³⁻¹", `"³⁻¹" is no exponent`],
    ["s^(1/0)", `"^(1/0)" is no exponent`],
    ["°C/min", `"°C" has no zero inside a compound unit: write K`],
  ])("%j", (text, message) => {
    expect(() => parseUnit(text)).toThrow(message);
    expect(() => parseUnit(text)).toThrow(UnitError);
  });

  test("the error carries the text", () => {
    try {
      parseUnit("KJ/mol");
      expect.unreachable();
    } catch (error) {
      expect((error as UnitError).text).toBe("KJ/mol");
      expect((error as UnitError).name).toBe("UnitError");
    }
  });
});

describe("scale zeros", () => {
  test("a difference of 5 °C is 5 K, a temperature of 5 °C is 278.15 K", () => {
    expect(convertDifference(5, parseUnit("°C"), parseUnit("K"))).toBe(5);
    expect(between(5, "°C", "K")).toBe(278.15);
  });

  test("there and back is the same temperature", () => {
    fc.assert(fc.property(fc.double({ min: -200, max: 2000, noNaN: true }), (celsius) => {
      expect(between(between(celsius, "°C", "K"), "K", "°C")).toBeCloseTo(celsius, 9);
    }));
  });
});

test("conversion there and back gives the value again, for any pair of like units", () => {
  const kinds = [
    ["s", "min", "h", "d", "ms", "week"],
    ["mol/L", "mmol/L", "µmol/L", "mM", "mol/m3", "molecule/cm3"],
    ["bar", "torr", "kPa", "atm", "Pa"],
    ["J/mol", "kJ/mol", "cal/mol", "kcal/mol"],
  ];
  const pair = fc.constantFrom(...kinds).chain((units) =>
    fc.tuple(fc.constantFrom(...units), fc.constantFrom(...units))
  );
  fc.assert(fc.property(
    pair,
    fc.double({ min: 1e-30, max: 1e30, noNaN: true }),
    ([from, to], value) => {
      const back = between(between(value, from, to), to, from);
      expect(Math.abs(back / value - 1)).toBeLessThan(1e-15);
    },
  ));
});
