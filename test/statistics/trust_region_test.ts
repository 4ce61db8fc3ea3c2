import { describe, expect, test } from "vitest";
import { type LeastSquaresProblem, minimizeSquares } from "../../lib/statistics/trust_region.ts";

interface Problem {
  readonly residuals: (p: ArrayLike<number>) => number[];
  readonly jacobian: (p: ArrayLike<number>) => number[][];
  readonly start: number[];
  readonly bounds?: [number[], number[]];
}

/** Rosenbrock's function as residuals 10(y − x²), 1 − x: minimum 0 at (1, 1).
 * Source: J. J. Moré, B. S. Garbow & K. E. Hillstrom, ACM TOMS 7 (1981) 17, problem 1. */
const ROSENBROCK: Problem = {
  residuals: ([x, y]: ArrayLike<number> & Iterable<number>) => [10 * (y - x * x), 1 - x],
  jacobian: ([x]: ArrayLike<number> & Iterable<number>) => [[-20 * x, 10], [-1, 0]],
  start: [-1.2, 1],
} as Problem;

/** Powell's singular function: the Jacobian has rank 2 at the minimum, 0 at the origin.
 * Source: Moré, Garbow & Hillstrom (1981), problem 13. */
const POWELL: Problem = {
  residuals: (p) => [
    p[0] + 10 * p[1],
    Math.sqrt(5) * (p[2] - p[3]),
    (p[1] - 2 * p[2]) ** 2,
    Math.sqrt(10) * (p[0] - p[3]) ** 2,
  ],
  jacobian: (p) => [
    [1, 10, 0, 0],
    [0, 0, Math.sqrt(5), -Math.sqrt(5)],
    [0, 2 * (p[1] - 2 * p[2]), -4 * (p[1] - 2 * p[2]), 0],
    [2 * Math.sqrt(10) * (p[0] - p[3]), 0, 0, -2 * Math.sqrt(10) * (p[0] - p[3])],
  ],
  start: [3, -1, 0, 1],
};

/** The problem in parameters measured in other units, p = units · q. */
function inUnits(problem: Problem, units: number[]): Problem {
  const back = (q: ArrayLike<number>) => units.map((u, j) => u * q[j]);
  return {
    residuals: (q) => problem.residuals(back(q)),
    jacobian: (q) => problem.jacobian(back(q)).map((row) => row.map((v, j) => v * units[j])),
    start: problem.start.map((v, j) => v / units[j]),
  };
}

function minimize(problem: Problem, maxIterations = 500) {
  const n = problem.start.length;
  const count = problem.residuals(problem.start).length;
  const setUp: LeastSquaresProblem = {
    count,
    residuals: (p, out) => out.set(problem.residuals(p)),
    jacobian: (p, out) => out.set(problem.jacobian(p).flat()),
    start: Float64Array.from(problem.start),
    lower: Float64Array.from(problem.bounds?.[0] ?? new Array(n).fill(-Infinity)),
    upper: Float64Array.from(problem.bounds?.[1] ?? new Array(n).fill(Infinity)),
  };
  return minimizeSquares(setUp, { maxIterations });
}

test("Rosenbrock's valley is followed to (1, 1)", () => {
  const end = minimize(ROSENBROCK);
  expect(end.converged, end.reason).toBe(true);
  expect(end.parameters[0]).toBeCloseTo(1, 7);
  expect(end.parameters[1]).toBeCloseTo(1, 7);
  expect(end.iterations).toBeLessThan(100);
});

test("a singular minimum is reached, or said not to be", () => {
  const end = minimize(POWELL);
  const square = end.residuals.reduce((sum, r) => sum + r * r, 0);
  expect(square).toBeLessThan(1e-12);
  expect(end.reason).not.toBe("");
});

test("the path does not depend on the units of the parameters", () => {
  const plain = minimize(ROSENBROCK);
  // Powers of two, so that rounding is the same as well.
  const other = minimize(inUnits(ROSENBROCK, [2 ** 40, 2 ** -30]));
  expect(other.iterations).toBe(plain.iterations);
  expect(other.parameters[0] * 2 ** 40).toBe(plain.parameters[0]);
  expect(other.parameters[1] * 2 ** -30).toBe(plain.parameters[1]);
});

test("the start is not written to", () => {
  const start = [...ROSENBROCK.start];
  minimize(ROSENBROCK);
  expect(ROSENBROCK.start).toEqual(start);
});

describe("bounds", () => {
  test("a minimum outside is met at the bound, which holds the parameter", () => {
    const end = minimize({ ...ROSENBROCK, bounds: [[-2, -2], [0.5, 2]] });
    expect(end.converged, end.reason).toBe(true);
    // With x held at 0.5 the best y is x², by hand.
    expect(end.parameters[0]).toBe(0.5);
    expect(end.parameters[1]).toBeCloseTo(0.25, 7);
    expect(end.free).toEqual([1]);
  });

  test("no residual is asked for outside them", () => {
    const seen: number[] = [];
    minimize({
      ...ROSENBROCK,
      residuals: (p) => {
        seen.push(p[0]);
        return ROSENBROCK.residuals(p);
      },
      bounds: [[-1.5, -2], [0.5, 2]],
    });
    expect(Math.max(...seen)).toBeLessThanOrEqual(0.5);
    expect(Math.min(...seen)).toBeGreaterThanOrEqual(-1.5);
  });
});

test("the budget is kept, and the best point so far is handed back", () => {
  const end = minimize(ROSENBROCK, 3);
  expect(end.converged).toBe(false);
  expect(end.iterations).toBe(3);
  expect(end.reason).toBe("not converged in 3 iterations");
  const square = (values: ArrayLike<number>) => Array.from(values).reduce((s, r) => s + r * r, 0);
  expect(square(end.residuals)).toBeLessThan(square(ROSENBROCK.residuals(ROSENBROCK.start)));
  expect([...end.residuals]).toEqual(ROSENBROCK.residuals(end.parameters));
});

test("a start without finite residuals is refused with the point", () => {
  expect(() => minimize({ ...ROSENBROCK, start: [NaN, 1] })).toThrow(
    "Cannot start a least-squares fit at [NaN, 1]",
  );
});

test("a step into a region where the model is not finite is taken back", () => {
  // ln p − 1 from p = 0.05: a full step from a small p overshoots to where p ≤ 0 gives NaN.
  const end = minimize({
    residuals: (p) => [Math.log(p[0]) - 1],
    jacobian: (p) => [[1 / p[0]]],
    start: [20],
  });
  expect(end.converged, end.reason).toBe(true);
  expect(end.parameters[0]).toBeCloseTo(Math.E, 8);
});
