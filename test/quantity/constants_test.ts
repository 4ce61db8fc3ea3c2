import { expect, test } from "vitest";
import {
  AVOGADRO_CONSTANT,
  BOLTZMANN_CONSTANT,
  GAS_CONSTANT,
  PLANCK_CONSTANT,
  STANDARD_ATMOSPHERE,
  ZERO_CELSIUS,
} from "../../lib/quantity/constants.ts";

test("the defining constants have the values fixed for the SI", () => {
  // BIPM, SI Brochure, 9th ed. (2019), table 1.
  expect(AVOGADRO_CONSTANT).toBe(6.02214076e23);
  expect(BOLTZMANN_CONSTANT).toBe(1.380649e-23);
  expect(PLANCK_CONSTANT).toBe(6.62607015e-34);
});

test("the gas constant is the CODATA 2018 value and the product it is defined by", () => {
  // Tiesinga et al., Rev. Mod. Phys. 93 (2021) 025010: R = 8.314462618… J/(mol K), exact.
  expect(GAS_CONSTANT.toFixed(9)).toBe("8.314462618");
  // 6.02214076 × 1.380649 multiplied out in whole numbers: no rounding on the way.
  const product = 602214076n * 1380649n;
  expect(GAS_CONSTANT).toBe(Number(`${product}e-14`));
});

test("the scale zero of Celsius and the standard atmosphere are exact", () => {
  // BIPM, SI Brochure, 9th ed. (2019), 2.3.1; 10th CGPM (1954), resolution 4.
  expect(ZERO_CELSIUS).toBe(273.15);
  expect(STANDARD_ATMOSPHERE).toBe(101325);
});

test("they give the reference values of transition-state theory", () => {
  // Computed in decimal arithmetic from the exact constants: ln(k_B/h) and k_B T/h at 298.15 K.
  expect(Math.log(BOLTZMANN_CONSTANT / PLANCK_CONSTANT)).toBeCloseTo(23.7600, 3);
  expect(BOLTZMANN_CONSTANT * 298.15 / PLANCK_CONSTANT / 1e12).toBeCloseTo(6.2124, 4);
});
