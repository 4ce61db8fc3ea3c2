import { describe, expect, test } from "vitest";
import { unitSymbol, unitSymbolHint } from "../../lib/quantity/unit_symbols.ts";

describe("sizes in SI base units", () => {
  test.each([
    // BIPM, SI Brochure, 9th ed. (2019), tables 7 (prefixes) and 8 (units accepted with the SI).
    ["s", 1],
    ["ms", 1e-3],
    ["µs", 1e-6],
    ["ns", 1e-9],
    ["min", 60],
    ["h", 3600],
    ["d", 86400],
    ["L", 1e-3],
    ["mL", 1e-6],
    ["mmol", 1e-3],
    ["µmol", 1e-6],
    ["nmol", 1e-9],
    ["kPa", 1e3],
    ["kJ", 1e3],
    // 7 days of 86400 s.
    ["week", 604800],
    // mol/L is 1000 mol/m³; its multiples in the trade's spelling.
    ["M", 1000],
    ["mM", 1],
    ["µM", 1e-3],
    ["nM", 1e-6],
    // NIST SP 811 (2008), appendix B.8: bar, atmosphere, torr, thermochemical calorie.
    ["bar", 1e5],
    ["mbar", 100],
    ["atm", 101325],
    ["torr", 101325 / 760],
    ["cal", 4.184],
    ["kcal", 4184],
    // Percent and parts per million are pure numbers; absorbance has the unit 1 (IUPAC Green Book).
    ["%", 0.01],
    ["ppm", 1e-6],
    ["AU", 1],
    ["mAU", 1e-3],
    // One molecule is 1/N_A mol, N_A = 6.02214076e23 /mol.
    ["molecule", 1 / 6.02214076e23],
  ])("%s", (text, size) => {
    expect(unitSymbol(text)?.factor).toBe(size);
  });
});

test("only a scale in degrees Celsius has a zero of its own", () => {
  expect(unitSymbol("°C")?.offset).toBe(273.15);
  expect(unitSymbol("K")?.offset).toBe(0);
  expect(unitSymbol("°C")?.dimension).toEqual(unitSymbol("K")?.dimension);
});

test.each([
  ["µL", "μL"],
  ["µmol", "μmol"],
  ["µM", "uM"],
  ["min", "minutes"],
  ["h", "hr"],
  ["d", "days"],
  ["L", "l"],
  ["°C", "℃"],
  ["torr", "Torr"],
])("%s and %s are the same unit", (one, other) => {
  expect(unitSymbol(one)).toBeDefined();
  expect(unitSymbol(other)).toEqual(unitSymbol(one));
});

test("names that every object has are no units", () => {
  for (const name of ["constructor", "toString", "__proto__", "hasOwnProperty"]) {
    expect(unitSymbol(name)).toBeUndefined();
  }
});

test("a hint names the spelling with other capitals", () => {
  expect(unitSymbolHint("KJ")).toBe(`: write "kJ"`);
  expect(unitSymbolHint("MIN")).toBe(`: write "min"`);
});

test("a hint for C and F names the scales that can be used", () => {
  expect(unitSymbolHint("C")).toBe(`: write "°C" or "K"`);
  expect(unitSymbolHint("F")).toBe(`: write "°C" or "K"`);
});

test("a hint for anything else lists what is known", () => {
  expect(unitSymbolHint("furlong")).toMatch(/^; known are .*\bmin\b.*\bkcal\b.*°C/);
});
