import { describe, expect, test } from "vitest";
import { axisTitle, axisUnit, linearTick, powerTick, powerTicks } from "../../lib/figure/axis.ts";

describe("units of axes", () => {
  test.each([
    ["s", 40, "s", 40],
    ["s", 200, "min", 200 / 60],
    ["s", 12_600, "h", 3.5],
    ["s", 500_000, "d", 500_000 / 86_400],
    ["mol/L", 0.01, "mmol/L", 10],
    ["mol/L", 2, "mol/L", 2],
    ["mol/L", 3e-6, "µmol/L", 3],
    ["1", 1.2, "1", 1.2],
  ])("%s up to %d is drawn in %s", (canonical, greatest, unit, shown) => {
    const axis = axisUnit(canonical, greatest);
    expect(axis.unit).toBe(unit);
    expect(axis.from(greatest)).toBeCloseTo(shown, 10);
  });

  test("title by quantity calculus, the bare name for a pure number", () => {
    expect(axisTitle("time", "min")).toBe("time / min");
    expect(axisTitle("absorbance", "1")).toBe("absorbance");
  });
});

describe("ticks", () => {
  test.each([[1e-6, "10⁻⁶"], [2e-6, "2×10⁻⁶"], [0.1, "0.1"], [100, "100"], [1e4, "10⁴"]])(
    "%d on a logarithmic axis reads %s",
    (value, text) => expect(powerTick(value)).toBe(text),
  );

  test("stand at powers of ten, closer where there are few", () => {
    expect(powerTicks(1e-8, 1e-2)).toEqual([1e-8, 1e-7, 1e-6, 1e-5, 1e-4, 1e-3, 1e-2]);
    expect(powerTicks(1e-4, 1e-3)).toEqual([1e-4, 2e-4, 5e-4, 1e-3]);
  });

  test("linear ones have a true minus sign and powers of ten", () => {
    expect(linearTick(-2)).toBe("−2");
    expect(linearTick(0.0002)).toBe("2×10⁻⁴");
    expect(linearTick(0.30000000000000004)).toBe("0.3");
  });
});
