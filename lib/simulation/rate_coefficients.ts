import type { TemperatureProgramme } from "./temperature_programme.ts";

/** Rate coefficients of a network's reactions, constant or changing in time. */
export interface RateCoefficients {
  /** Their values, at the time last asked for where they change. */
  readonly k: Float64Array;
  /** Sets `k` for time t, s; absent where they are constant. */
  at?(t: number): void;
  /** Sets `kdot` = dk/dt for time t, s; goes with `at`. */
  derivative?(t: number, kdot: Float64Array): void;
}

/** Relative step of temperature for dk/dT by central differences, error about 1e-9. */
const TEMPERATURE_STEP = 1e-5;

/** Rate coefficients of reactions whose constants follow a temperature programme.
 *
 * @param functions rate coefficient of each reaction, of temperature in K
 * @param programme the temperature in time
 * @param start time at which `k` is set first, s */
export function followTemperature(
  functions: readonly ((temperature: number) => number)[],
  programme: TemperatureProgramme,
  start: number,
): RateCoefficients {
  const k = new Float64Array(functions.length);
  const at = (t: number): void => {
    const temperature = programme.at(t);
    for (let j = 0; j < k.length; j++) k[j] = functions[j](temperature);
  };
  at(start);
  if (programme.constant) return { k };
  return {
    k,
    at,
    derivative: (t, kdot) => {
      const temperature = programme.at(t);
      const slope = programme.slope(t);
      const h = TEMPERATURE_STEP * temperature;
      for (let j = 0; j < k.length; j++) {
        const change = functions[j](temperature + h) - functions[j](temperature - h);
        kdot[j] = slope * change / (2 * h);
      }
    },
  };
}
