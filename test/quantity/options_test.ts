import { describe, expect, test } from "vitest";
import * as option from "../../lib/quantity/options.ts";

const READERS = {
  temperature: option.quantity("K", { above: 0 }),
  duration: option.quantity("s", { atLeast: 0 }),
  maxIterations: option.integer(1),
  level: option.number({ min: 0, max: 1 }),
  scale: option.number({ min: 0 }),
  method: option.oneOf("direct", "stiff"),
  title: option.text,
  verbose: option.flag,
  weights: option.list(option.number({ min: 0 })),
  start: option.record(option.number()),
  model: option.callable,
  signal: option.instance(AbortSignal),
};

const read = (given: unknown) => option.readOptions("fitThing", given, READERS);

test("options are read in canonical units", () => {
  const model = () => 1;
  const { signal } = new AbortController();
  expect(read({
    temperature: "25 °C",
    duration: "2 min",
    maxIterations: 5,
    level: 0.95,
    method: "stiff",
    title: "t",
    verbose: false,
    weights: new Float64Array([1, 2]),
    start: { k1: 3 },
    model,
    signal,
  })).toEqual({
    temperature: 298.15,
    duration: 120,
    maxIterations: 5,
    level: 0.95,
    method: "stiff",
    title: "t",
    verbose: false,
    weights: [1, 2],
    start: { k1: 3 },
    model,
    signal,
  });
});

test("what is left out, or undefined, is left out", () => {
  expect(read(undefined)).toEqual({});
  expect(read({ level: undefined })).toEqual({});
});

describe("an option that does not exist is refused", () => {
  test("with the nearest name that does", () => {
    expect(() => read({ temprature: 300 })).toThrow(
      `Cannot use the option "temprature" of fitThing: it does not exist; did you mean ` +
        `"temperature"? (there are: temperature, duration,`,
    );
    expect(() => read({ Level: 0.9 })).toThrow(`did you mean "level"?`);
  });

  test("without a guess where nothing is near", () => {
    const message = () => read({ zzzzzzzzzzzzzzzzzzzz: 1 });
    expect(message).toThrow("does not exist (there are:");
    expect(message).toThrow(TypeError);
  });

  test("even if every object has a property of that name", () => {
    for (const name of ["toString", "constructor", "valueOf", "hasOwnProperty"]) {
      expect(() => read({ [name]: 1 })).toThrow(`Cannot use the option "${name}"`);
    }
  });

  test("and where it was undefined too", () => {
    expect(() => read({ temprature: undefined })).toThrow("temprature");
  });
});

describe("a value of the wrong type is shown with what was expected", () => {
  test.each([
    [
      { maxIterations: 2.5 },
      `Cannot use 2.5 as option "maxIterations" of fitThing: expected a whole number`,
    ],
    [
      { level: "0.95" },
      `Cannot use "0.95" as option "level" of fitThing: expected a finite number`,
    ],
    [{ level: NaN }, `Cannot use NaN as option "level" of fitThing: expected a finite number`],
    [{ title: 3 }, `Cannot use 3 as option "title" of fitThing: expected text`],
    [
      { verbose: "yes" },
      `Cannot use "yes" as option "verbose" of fitThing: expected true or false`,
    ],
    [{ weights: 3 }, `Cannot use 3 as option "weights" of fitThing: expected a list`],
    [
      { weights: [1, "2"] },
      `Cannot use "2" as option "weights" of fitThing, item 1: expected a finite number`,
    ],
    [{ start: [1] }, `Cannot use a list of 1 as option "start"`],
    [
      { start: new Map([["k1", 1]]) },
      `Cannot use a Map as option "start" of fitThing: expected an object`,
    ],
    [
      { start: { k1: null } },
      `Cannot use null as option "start" of fitThing, "k1": expected a finite number`,
    ],
    [{ model: "x" }, `Cannot use "x" as option "model" of fitThing: expected a function`],
    [{ signal: {} }, `expected an object of AbortSignal`],
    [{ temperature: null }, `Cannot read option "temperature" of fitThing: expected a number in K`],
  ])("%o", (given, message) => {
    expect(() => read(given)).toThrow(message);
    expect(() => read(given)).toThrow(TypeError);
  });

  test.each([[5, "5"], ["x", `"x"`], [null, "null"], [[1, 2], "a list of 2"], [
    new Map(),
    "a Map",
  ]])(
    "options that are %o are refused",
    (given, shown) => {
      expect(() => read(given)).toThrow(
        `Cannot read the options of fitThing: expected an object, got ${shown}`,
      );
    },
  );
});

describe("a value out of range is shown with the range", () => {
  test.each([
    [
      { temperature: 0 },
      `Cannot use 0 as option "temperature" of fitThing: expected more than 0 K`,
    ],
    [{ temperature: "-300 °C" }, `Cannot use "-300 °C" as option "temperature"`],
    [{ duration: -1 }, "expected 0 s or more"],
    [
      { maxIterations: 0 },
      `Cannot use 0 as option "maxIterations" of fitThing: expected 1 or more`,
    ],
    [{ level: 1.5 }, `Cannot use 1.5 as option "level" of fitThing: expected between 0 and 1`],
    [{ scale: -2 }, `Cannot use -2 as option "scale" of fitThing: expected 0 or more`],
    [
      { method: "fast" },
      `Cannot use "fast" as option "method" of fitThing: expected one of "direct", "stiff"`,
    ],
  ])("%o", (given, message) => {
    expect(() => read(given)).toThrow(message);
    expect(() => read(given)).toThrow(RangeError);
  });
});

describe("either of two kinds", () => {
  const reader = option.either(option.number(), option.list(option.number()));

  test("takes both", () => {
    expect(reader(3, "it")).toBe(3);
    expect(reader([3, 4], "it")).toEqual([3, 4]);
  });

  test("refuses the rest in the words of the first", () => {
    expect(() => reader("3", "it")).toThrow(`Cannot use "3" as it: expected a finite number`);
  });
});
