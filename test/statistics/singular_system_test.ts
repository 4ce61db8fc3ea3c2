import { describe, expect, test } from "vitest";
import {
  dampedStep,
  dampingFor,
  normalInverse,
  reduceSystem,
} from "../../lib/statistics/singular_system.ts";

// J = [[3, 1], [1, 2], [0, 1]], r = (1, 2, 3): small enough for the normal equations by hand.
// JᵀJ = [[10, 5], [5, 6]], det 35; Jᵀr = (5, 8); s = −(JᵀJ)⁻¹ Jᵀr = −(6·5 − 5·8, 10·8 − 5·5)/35.
const jacobian = Float64Array.of(3, 1, 1, 2, 0, 1);
const residual = Float64Array.of(1, 2, 3);
const scale = Float64Array.of(Math.sqrt(10), Math.sqrt(6));
const system = reduceSystem(jacobian, residual, scale);

test("the full step is the least-squares solution", () => {
  const step = new Float64Array(2);
  dampedStep(system, 0, step);
  expect(step[0]).toBeCloseTo(10 / 35, 14);
  expect(step[1]).toBeCloseTo(-55 / 35, 14);
});

test("the inverse of JᵀJ", () => {
  const [[a, b], [c, d]] = normalInverse(system);
  expect([a, b, c, d].map((v) => v * 35)).toEqual(
    [6, -5, -5, 10].map((v) => expect.closeTo(v, 12)),
  );
});

test("the sums of squares: all of r, and what the columns reach", () => {
  expect(system.sumOfSquares).toBe(14);
  // Jᵀr · (JᵀJ)⁻¹ Jᵀr = (5·(−10) + 8·55)/35.
  expect(system.reachable).toBeCloseTo(390 / 35, 12);
});

describe("damping", () => {
  test("is 0 where the full step fits inside the radius", () => {
    expect(dampingFor(system, 1e6)).toBe(0);
  });

  test.each([3, 1, 0.1, 1e-3, 1e-8])("keeps the step to the radius %d", (radius) => {
    const step = new Float64Array(2);
    const length = dampedStep(system, dampingFor(system, radius), step);
    expect(length / radius).toBeLessThan(1.002);
    expect(length / radius).toBeGreaterThan(radius === 3 ? 0.9 : 0.99);
    expect(length).toBeCloseTo(Math.hypot(step[0] * scale[0], step[1] * scale[1]), 12);
  });
});

test("columns that are the same have rank 1, and the shortest step", () => {
  const twins = reduceSystem(Float64Array.of(1, 1, 2, 2, 3, 3), residual, Float64Array.of(1, 1));
  expect(twins.rank).toBe(1);
  const step = new Float64Array(2);
  dampedStep(twins, 0, step);
  expect(step[0]).toBeCloseTo(step[1], 12);
  // Both together: −(1·1 + 2·2 + 3·3)/14 = −1.
  expect(step[0] + step[1]).toBeCloseTo(-1, 12);
});
