import { describe, expect, test } from "vitest";
import fc from "fast-check";
import { Estimate } from "../../lib/quantity/estimate.ts";
import { UnitError } from "../../lib/quantity/unit.ts";

const k = new Estimate({
  value: 0.29020,
  standardError: 0.00192,
  unit: "min⁻¹",
  degreesOfFreedom: 6,
});

describe("text", () => {
  test.each([
    [{ value: 83.142, standardError: 0.624, unit: "kJ/mol" }, "83.14 ± 0.62 kJ/mol"],
    [{ value: 12.34, standardError: 0.0996, unit: "s" }, "12.34 ± 0.10 s"],
    [{ value: 123.4, standardError: 9.96, unit: "s" }, "123 ± 10 s"],
    [{ value: 0, standardError: 0.0123, unit: "mol/L" }, "0.000 ± 0.012 mol/L"],
    [{ value: -2.5, standardError: 0.2, unit: "1" }, "−2.50 ± 0.20"],
    [{ value: 1e15, standardError: 2e13, unit: "s⁻¹" }, "(1.000 ± 0.020)×10¹⁵ s⁻¹"],
    [{ value: 3.2e-9, standardError: 4e-11, unit: "s⁻¹" }, "(3.200 ± 0.040)×10⁻⁹ s⁻¹"],
    [{ value: 1.23456, standardError: NaN, unit: "s" }, "1.235 s (no standard error)"],
    [{ value: 1.5, standardError: 0, unit: "s" }, "1.50000 s (exact)"],
    [{ value: NaN, standardError: NaN, unit: "s" }, "not determined s"],
    [{ value: NaN, standardError: 0.1, unit: "1" }, "not determined"],
    [{ value: Infinity, standardError: 0.1, unit: "s" }, "∞ s"],
  ])("%o", (input, expected) => {
    const estimate = new Estimate(input);
    expect(estimate.toString()).toBe(expected);
    const views = estimate as unknown as Record<symbol, () => unknown>;
    expect(views[Symbol.for("Deno.customInspect")]()).toBe(expected);
    expect(views[Symbol.for("Jupyter.display")]()).toEqual({ "text/plain": expected });
  });
});

describe("in another unit", () => {
  test("per minute is shown per second", () => {
    const perSecond = k.in("s⁻¹");
    expect(perSecond.value.toExponential(4)).toBe("4.8367e-3");
    expect(perSecond.toString()).toBe("0.004837 ± 0.000032 s⁻¹");
    expect(perSecond.degreesOfFreedom).toBe(6);
  });

  test("kJ/mol is shown in kcal/mol, 4.184 kJ to the kcal", () => {
    // NIST SP 811 (2008), appendix B.8: 1 thermochemical kilocalorie = 4184 J.
    const e = new Estimate({ value: 83.14, standardError: 0.62, unit: "kJ/mol" }).in("kcal/mol");
    expect(e.value).toBeCloseTo(83.14 / 4.184, 12);
    expect(e.standardError).toBeCloseTo(0.62 / 4.184, 12);
    expect(e.toString()).toBe("19.87 ± 0.15 kcal/mol");
  });

  test("the zero of the Celsius scale moves the value and not the uncertainty", () => {
    const kelvin = new Estimate({ value: 25, standardError: 0.5, unit: "°C" }).in("K");
    expect(kelvin.value).toBe(298.15);
    expect(kelvin.standardError).toBe(0.5);
    expect(kelvin.in("°C").value).toBeCloseTo(25, 12);
  });

  test("the relative standard error stays", () => {
    fc.assert(fc.property(
      fc.double({ min: 1e-9, max: 1e9, noNaN: true }),
      fc.constantFrom("s⁻¹", "h⁻¹", "d⁻¹"),
      (value, unit) => {
        const e = new Estimate({ value, standardError: value / 7, unit: "min⁻¹" }).in(unit);
        expect(e.relativeStandardError).toBeCloseTo(1 / 7, 12);
      },
    ));
  });

  test("a unit that measures something else is refused", () => {
    expect(() => k.in("mol")).toThrow(
      "Cannot convert min⁻¹ to mol: min⁻¹ measures first-order rate constant, mol measures " +
        "amount of substance",
    );
    expect(() => k.in("L/(mol s)")).toThrow(UnitError);
  });
});

describe("interval", () => {
  const unit = (degreesOfFreedom?: number) =>
    new Estimate({ value: 0, standardError: 1, unit: "1", degreesOfFreedom });

  test.each([
    // NIST/SEMATECH e-Handbook of Statistical Methods, 1.3.6.7.2, upper critical values of
    // Student's t: columns 0.95, 0.975 and 0.995.
    [1, 0.90, 6.314],
    [1, 0.95, 12.706],
    [1, 0.99, 63.657],
    [2, 0.95, 4.303],
    [3, 0.95, 3.182],
    [5, 0.90, 2.015],
    [6, 0.95, 2.447],
    [10, 0.95, 2.228],
    [10, 0.99, 3.169],
    [20, 0.95, 2.086],
    [30, 0.95, 2.042],
    [100, 0.95, 1.984],
    [Infinity, 0.90, 1.645],
    [Infinity, 0.95, 1.960],
    [Infinity, 0.99, 2.576],
    [1e20, 0.95, 1.960],
  ])("with %d degrees of freedom at level %d the factor is %d", (freedom, level, t) => {
    const [low, high] = unit(freedom).interval(level);
    expect(high.toFixed(3)).toBe(t.toFixed(3));
    expect(low).toBe(-high);
  });

  test("infinite degrees of freedom are a known error", () => {
    expect(unit(Infinity).degreesOfFreedom).toBeUndefined();
    expect(unit(Infinity).interval()).toEqual(unit().interval());
  });

  test("the crystal-violet rate constant has the half-width 0.0047 /min", () => {
    // 2.447 × 0.00192 by hand, 2.447 from the table above.
    const [low, high] = k.interval();
    expect((high - low) / 2).toBeCloseTo(0.0047, 4);
  });

  test("a quantity fitted as its logarithm has a positive interval, symmetric as a factor", () => {
    fc.assert(fc.property(
      fc.double({ min: 1e-20, max: 1e20, noNaN: true }),
      fc.double({ min: 1e-3, max: 20, noNaN: true }),
      (value, relative) => {
        const [low, high] = new Estimate({
          value,
          standardError: relative * value,
          unit: "s⁻¹",
          symmetricOn: "logarithmic",
        }).interval();
        expect(low).toBeGreaterThan(0);
        expect(Math.log(high / value)).toBeCloseTo(Math.log(value / low), 9);
        // 1.959964 is the 97.5 % point of the normal distribution (table above).
        expect(Math.log(high / value) / relative).toBeCloseTo(1.959964, 5);
      },
    ));
  });

  test("a negative quantity with a logarithmic error keeps its ends in order", () => {
    const [low, high] = new Estimate({
      value: -2,
      standardError: 1,
      unit: "1",
      symmetricOn: "logarithmic",
    }).interval();
    expect(low).toBeLessThan(-2);
    expect(high).toBeGreaterThan(-2);
    expect(high).toBeLessThan(0);
  });

  test("the scale of symmetry is kept in another unit", () => {
    const e = new Estimate({
      value: 2,
      standardError: 4,
      unit: "min⁻¹",
      symmetricOn: "logarithmic",
    });
    expect(e.in("s⁻¹").symmetricOn).toBe("logarithmic");
    expect(e.in("s⁻¹").interval()[0]).toBeCloseTo(e.interval()[0] / 60, 12);
  });

  test("without a standard error there is no interval", () => {
    const e = new Estimate({ value: 1, standardError: NaN, unit: "s" });
    expect(e.interval()).toEqual([NaN, NaN]);
  });

  test.each([0, 1, 95, -0.5, NaN])("level %d is refused", (level) => {
    expect(() => k.interval(level)).toThrow(
      `Cannot give an interval of level ${level}: write a number between 0 and 1, such as 0.95`,
    );
  });
});

describe("plain data", () => {
  test("names and units are stated", () => {
    const json = JSON.parse(JSON.stringify(k));
    expect(json).toMatchObject({
      value: 0.2902,
      standardError: 0.00192,
      unit: "min⁻¹",
      degreesOfFreedom: 6,
    });
    expect(json.interval95).toEqual(k.interval(0.95));
  });

  test("what is not finite is null", () => {
    expect(new Estimate({ value: NaN, standardError: NaN, unit: "s" }).toJSON()).toEqual({
      value: null,
      standardError: null,
      unit: "s",
      degreesOfFreedom: null,
      interval95: [null, null],
    });
  });
});

test("a negative standard error and an unknown unit are refused", () => {
  expect(() => new Estimate({ value: 1, standardError: -0.1, unit: "s" })).toThrow(
    "Cannot make an estimate with the standard error -0.1: it must be 0 or more",
  );
  expect(() => new Estimate({ value: 1, standardError: 0.1, unit: "KJ" })).toThrow(UnitError);
});
