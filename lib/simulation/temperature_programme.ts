import { type Quantity, readQuantity } from "../quantity/read_quantity.ts";

/** Temperature in time as a table: straight between its points, constant before the first and after the last.
 * A ramp is a table of two points. */
export interface TemperatureTable {
  /** Times of the points, ascending, s or text with its unit. */
  readonly times: readonly Quantity[];
  /** Temperatures at them, K or text with its unit. */
  readonly temperatures: readonly Quantity[];
}

/** A temperature programme ready for use. */
export interface TemperatureProgramme {
  /** Temperature at a time, K. */
  at(time: number): number;
  /** Its slope at a time, K/s; at a point of the table that of what follows. */
  slope(time: number): number;
  /** Times at which the slope jumps, s, ascending: an integration starts anew there. */
  readonly bends: readonly number[];
  /** Whether it is one temperature throughout. */
  readonly constant: boolean;
}

/** Reads a temperature, or a table of temperatures in time.
 *
 * @param given K, text with its unit, or a table
 * @throws {RangeError} on a temperature that is not above 0 K, a table of unequal lengths or without points, or
 * times that do not ascend */
export function temperatureProgramme(given: Quantity | TemperatureTable): TemperatureProgramme {
  if (typeof given === "number" || typeof given === "string") {
    const temperature = aboveZero(given, "temperature");
    return { at: () => temperature, slope: () => 0, bends: [], constant: true };
  }
  const { times: givenTimes, temperatures: givenTemperatures } = given;
  if (!Array.isArray(givenTimes) || !Array.isArray(givenTemperatures)) {
    throw new TypeError(
      `Cannot read a temperature programme from ${
        JSON.stringify(given)
      }: write a temperature, or ` +
        `{ times: ["0 min", "30 min"], temperatures: ["25 °C", "80 °C"] }`,
    );
  }
  const times = givenTimes.map((time, i) => readQuantity(time, "s", `time ${i} of the programme`));
  const temperatures = givenTemperatures.map((temperature, i) =>
    aboveZero(temperature, `temperature ${i} of the programme`)
  );
  if (times.length === 0 || times.length !== temperatures.length) {
    throw new RangeError(
      `Cannot use a temperature programme of ${times.length} times and ${temperatures.length} ` +
        `temperatures: give as many of both, and at least one`,
    );
  }
  times.forEach((time, i) => {
    if (i === 0 || time > times[i - 1]) return;
    throw new RangeError(
      `Cannot use a temperature programme whose time ${i} is ${time} s after ${
        times[i - 1]
      } s: write them ` +
        `in ascending order`,
    );
  });
  const last = times.length - 1;
  /** Index of the point at or before a time, −1 before the first. */
  const place = (time: number): number => {
    let low = -1;
    let high = times.length;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (times[middle] <= time) low = middle;
      else high = middle;
    }
    return low;
  };
  const slopeAfter = (i: number): number =>
    i < 0 || i >= last ? 0 : (temperatures[i + 1] - temperatures[i]) / (times[i + 1] - times[i]);
  return {
    at: (time) => {
      const i = place(time);
      return i < 0 ? temperatures[0] : temperatures[i] + slopeAfter(i) * (time - times[i]);
    },
    slope: (time) => slopeAfter(place(time)),
    bends: times.filter((_, i) => slopeAfter(i - 1) !== slopeAfter(i)),
    constant: temperatures.every((temperature) => temperature === temperatures[0]),
  };
}

function aboveZero(given: Quantity, name: string): number {
  const temperature = readQuantity(given, "K", name);
  if (temperature > 0) return temperature;
  throw new RangeError(`Cannot use ${temperature} K as ${name}: it must be above 0 K`);
}
