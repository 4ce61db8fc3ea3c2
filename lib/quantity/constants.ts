/** Physical constants, CODATA 2018 (E. Tiesinga, P. J. Mohr, D. B. Newell, B. N. Taylor, Rev. Mod.
 * Phys. 93 (2021) 025010). The Boltzmann, Planck and Avogadro constants are exact by the definition
 * of the SI units (BIPM, SI Brochure, 9th ed., 2019), and so is the gas constant that follows. */

/** Avogadro constant N_A, 1/mol (exact). */
export const AVOGADRO_CONSTANT = 6.02214076e23;

/** Boltzmann constant k_B, J/K (exact). */
export const BOLTZMANN_CONSTANT = 1.380649e-23;

/** Planck constant h, J s (exact). */
export const PLANCK_CONSTANT = 6.62607015e-34;

/** Molar gas constant R = N_A k_B, J/(mol K) (exact). */
export const GAS_CONSTANT = 8.31446261815324;

/** 0 °C on the kelvin scale, K (exact). */
export const ZERO_CELSIUS = 273.15;

/** Standard atmosphere, Pa (exact). */
export const STANDARD_ATMOSPHERE = 101325;
