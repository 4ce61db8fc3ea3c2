import { describe, expect, test } from "vitest";
import { bestRuns, geometricMean, timeAt } from "./work_precision.ts";

const line = [
  { error: 1e-2, ms: 1 },
  { error: 1e-4, ms: 10 },
  { error: 1e-3, ms: 20 },
  { error: 1e-6, ms: 100 },
  { error: Infinity, ms: 0.1 },
];

describe("a line of runs", () => {
  test("is led by those that no other run beats", () => {
    expect(bestRuns(line).map((run) => run.ms)).toEqual([1, 10, 100]);
  });
  test("is interpolated on logarithmic scales", () => {
    expect(timeAt(line, 1e-3)).toBeCloseTo(Math.sqrt(10), 12);
    expect(timeAt(line, 1e-5)).toBeCloseTo(10 * Math.sqrt(10), 12);
  });
  test("is not extended: its loosest run stands for looser ones, nothing for tighter ones", () => {
    expect(timeAt(line, 1)).toBe(1);
    expect(timeAt(line, 1e-7)).toBeNaN();
  });
});

test("the geometric mean leaves out what is no number", () => {
  expect(geometricMean([1, 100, NaN, Infinity])).toBeCloseTo(10, 12);
});
