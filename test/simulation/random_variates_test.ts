import { describe, expect, test } from "vitest";
import { RandomVariates } from "../../lib/simulation/random_variates.ts";

function moments(draw: () => number, count: number): { mean: number; variance: number } {
  let sum = 0;
  let squares = 0;
  for (let i = 0; i < count; i++) {
    const x = draw();
    sum += x;
    squares += x * x;
  }
  const mean = sum / count;
  return { mean, variance: squares / count - mean * mean };
}

const COUNT = 200_000;

test("uniform: mean 1/2, variance 1/12, never an end", () => {
  const random = new RandomVariates(3);
  let least = 1;
  let greatest = 0;
  const { mean, variance } = moments(() => {
    const u = random.uniform();
    least = Math.min(least, u);
    greatest = Math.max(greatest, u);
    return u;
  }, COUNT);
  expect(Math.abs(mean - 0.5)).toBeLessThan(4 * Math.sqrt(1 / 12 / COUNT));
  expect(Math.abs(variance - 1 / 12)).toBeLessThan(4 * Math.sqrt(1 / 180 / COUNT));
  expect(least).toBeGreaterThan(0);
  expect(greatest).toBeLessThan(1);
});

test("exponential: mean 1, variance 1", () => {
  const random = new RandomVariates(4);
  const { mean, variance } = moments(() => random.exponential(), COUNT);
  expect(Math.abs(mean - 1)).toBeLessThan(4 / Math.sqrt(COUNT));
  expect(Math.abs(variance - 1)).toBeLessThan(4 * Math.sqrt(8 / COUNT));
});

describe("Poisson: mean and variance are the parameter", () => {
  test.each([0.3, 4, 9.99, 10, 25, 400, 1e5])("%d", (parameter) => {
    const random = new RandomVariates(5);
    const { mean, variance } = moments(() => random.poisson(parameter), COUNT);
    expect(Math.abs(mean - parameter)).toBeLessThan(4 * Math.sqrt(parameter / COUNT));
    // The variance of a squared deviation of a Poisson variate is λ + 2λ².
    expect(Math.abs(variance - parameter))
      .toBeLessThan(4 * Math.sqrt((parameter + 2 * parameter ** 2) / COUNT));
  });

  test("the frequencies are those of the law, on both sides of the change of method", () => {
    for (const parameter of [8, 12]) {
      const random = new RandomVariates(6);
      const seen = new Float64Array(60);
      for (let i = 0; i < COUNT; i++) seen[random.poisson(parameter)]++;
      let probability = Math.exp(-parameter);
      let chiSquare = 0;
      let cells = 0;
      for (let k = 0; k < 60; k++) {
        if (k > 0) probability *= parameter / k;
        const expected = COUNT * probability;
        if (expected < 20) continue;
        chiSquare += (seen[k] - expected) ** 2 / expected;
        cells++;
      }
      // χ² has mean ν and standard deviation √(2ν).
      expect(chiSquare).toBeLessThan(cells + 5 * Math.sqrt(2 * cells));
    }
  });
});

test("the same seed gives the same numbers, another one others", () => {
  const draw = (seed: number) => {
    const random = new RandomVariates(seed);
    return Array.from({ length: 5 }, () => random.uniform());
  };
  expect(draw(9)).toEqual(draw(9));
  expect(draw(9)).not.toEqual(draw(10));
});
