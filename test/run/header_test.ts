import { describe, expect, test } from "vitest";
import { readHeader, splitHeader } from "../../lib/run/header.ts";

describe("a header is taken apart", () => {
  test.each([
    ["time [min]", "time", "min"],
    ["time (min)", "time", "min"],
    ["time/min", "time", "min"],
    ["time / min", "time", "min"],
    ["c(ester)/(mmol/L)", "c(ester)", "mmol/L"],
    ["c(ester) / (mmol L-1)", "c(ester)", "mmol L-1"],
    ["ester[mmol/L]", "ester", "mmol/L"],
    ["conversion (%)", "conversion", "%"],
    ["[ester]0 [mmol/L]", "[ester]0", "mmol/L"],
    ["u(ester) [mmol/L]", "u(ester)", "mmol/L"],
    ["rate constant [L/(mol s)]", "rate constant", "L/(mol s)"],
    ["E-17 [mmol/L]", "E-17", "mmol/L"],
  ])("%s", (text, name, unit) => {
    expect(splitHeader(text)).toEqual({ name, unit });
  });

  test.each(["pH", "u(ester)", "operator (initials)", "acid/base", "batch"])(
    "%s has no unit",
    (text) => expect(splitHeader(text)).toEqual({ name: text }),
  );
});

describe("what a column holds", () => {
  test.each([
    ["time [min]", { role: "time", unit: "min" }],
    ["t/s", { role: "time", unit: "s" }],
    ["T/K", { role: "temperature", unit: "K" }],
    ["Temperature [°C]", { role: "temperature", unit: "°C" }],
    ["run", { role: "run" }],
    ["species", { role: "species" }],
    ["initial ester [mmol/L]", { role: "initial", species: "ester", unit: "mmol/L" }],
    ["initial [ester] [mmol/L]", { role: "initial", species: "ester", unit: "mmol/L" }],
    ["[ester]0 [mM]", { role: "initial", species: "ester", unit: "mM" }],
    ["u(ester) [mmol/L]", { role: "uncertainty", signal: "ester", unit: "mmol/L" }],
    ["ester [mmol/L]", { role: "signal", name: "ester", unit: "mmol/L" }],
    ["pH", { role: "property", name: "pH" }],
    ["pH [1]", { role: "signal", name: "pH", unit: "1" }],
    ["left out", { role: "exclusion" }],
  ])("%s", (text, column) => {
    expect(readHeader(text)).toEqual(column);
  });

  test.each([
    ["time", /unit is missing.*"time \[min\]"/],
    ["time [mmol/L]", /mmol\/L is no unit of time.*"time \[min\]"/],
    ["temperature [min]", /min is no unit of temperature.*"temperature \[°C\]"/],
    ["temperature [C]", /"C" is not known: write "°C" or "K"/],
    ["initial ester [min]", /min is no unit of initial ester/],
    ["u(ester)", /unit is missing; write "u\(ester\) \[mmol\/L\]"/],
    ["ester [mmol/Liter]", /"Liter" is not known: write "liter"/],
    ["ester []", /write "1" for a pure number/],
  ])("%s is refused with what to write", (text, message) => {
    expect(() => readHeader(text)).toThrow(message);
  });
});
