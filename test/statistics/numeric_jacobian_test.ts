import { expect, test } from "vitest";
import { numericJacobian } from "../../lib/statistics/numeric_jacobian.ts";
import { correctDigits } from "../reference/reference.ts";

const times = [0.5, 1, 2, 5];
const residuals = ([c0, k]: Float64Array, out: Float64Array) =>
  times.forEach((t, i) => out[i] = c0 * Math.exp(-k * t));

function jacobianAt(point: number[], lower: number[], upper: number[]): Float64Array {
  const out = new Float64Array(2 * times.length);
  numericJacobian(
    residuals,
    times.length,
    Float64Array.from(point, (p) => Math.abs(p) || 1),
    Float64Array.from(lower),
    Float64Array.from(upper),
  )(Float64Array.from(point), out);
  return out;
}

const analytic = ([c0, k]: number[]) =>
  times.flatMap((t) => [Math.exp(-k * t), -c0 * t * Math.exp(-k * t)]);

const INFINITE = [[-Infinity, -Infinity], [Infinity, Infinity]];

test("derivatives of a decay have ten digits", () => {
  const exact = analytic([2, 0.3]);
  jacobianAt([2, 0.3], INFINITE[0], INFINITE[1]).forEach((value, i) =>
    expect(correctDigits(value, exact[i])).toBeGreaterThan(10)
  );
});

test("at a bound they are taken from inside", () => {
  const exact = analytic([2, 0]);
  jacobianAt([2, 0], [0, 0], [2, 1]).forEach((value, i) =>
    expect(correctDigits(value, exact[i])).toBeGreaterThan(8)
  );
});

test("no evaluation lies outside the bounds, and the point is given back as it was", () => {
  const seen: number[] = [];
  const point = Float64Array.of(0, 1);
  numericJacobian(
    (p, out) => {
      seen.push(p[0]);
      out[0] = p[0] + p[1];
    },
    1,
    Float64Array.of(1, 1),
    Float64Array.of(0, -1),
    Float64Array.of(1, 2),
  )(point, new Float64Array(2));
  expect(Math.min(...seen)).toBeGreaterThanOrEqual(0);
  expect([...point]).toEqual([0, 1]);
});
