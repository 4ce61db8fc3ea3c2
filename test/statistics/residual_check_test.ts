import { expect, test } from "vitest";
import { checkResiduals } from "../../lib/statistics/residual_check.ts";

const bow = [-3, -2, -1, 0.5, 1, 2, 2, 1, 0.5, -1, -2, -3];
const noise = [1, -2, 1, -1, -1, 2, -1, 1, 1, -2, 1, -1];

test("a bow is found, and the numbers are in the verdict", () => {
  const check = checkResiduals([bow]);
  expect(check.pattern).toBe(true);
  expect(check.runs).toBe(3);
  expect(check.verdict).toContain("residuals hang together");
  expect(check.verdict).toContain(`p = ${check.runsProbability.toPrecision(2)}`);
  expect(check.verdict).toContain(`Durbin–Watson ${check.durbinWatson.toFixed(2)}`);
});

test("noise is not taken for a trend", () => {
  const check = checkResiduals([noise]);
  expect(check.pattern).toBe(false);
  expect(check.verdict).toContain("no trend");
});

test("runs of different experiments are not joined end to end", () => {
  // Each series has one sign after the other; joined, the last + and the first + would be one run.
  const check = checkResiduals([[1, -1, 1], [1, -1, 1]]);
  expect(check.runs).toBe(6);
});

test("a bow in one of many series is still judged with all of them in mind", () => {
  const alone = checkResiduals([bow]).runsProbability;
  const many = checkResiduals([bow, noise, noise, noise]).runsProbability;
  expect(many).toBeCloseTo(4 * alone, 12);
});

test("series without residuals give no pattern and no nonsense in words", () => {
  for (const series of [[], [[]], [[0, 0, 0]], [[0, 0], [0, 0]]]) {
    const check = checkResiduals(series);
    expect(check.pattern).toBe(false);
    expect(check.verdict).not.toMatch(/NaN|Infinity|undefined/);
  }
});
