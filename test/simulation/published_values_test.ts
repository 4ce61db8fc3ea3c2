import { describe, expect, test } from "vitest";
import { simulate } from "../../lib/simulation/simulate.ts";
import { deliveredError, errorsAt, prepare, problem, solve } from "../bench/problems.ts";

// Final values of the Test Set for IVP Solvers (F. Mazzia and C. Magherini, University of Bari, 2008),
// recalled from memory; they agree with the extended-precision solutions in test/reference/simulation.
const PUBLISHED: [string, number, Record<string, number>][] = [
  ["robertson", 1e11, { A: 2.083340149701255e-8, B: 8.333360770334713e-14, C: 0.999999979166505 }],
  ["robertson", 40, { A: 0.7158270688, B: 9.185535e-6, C: 0.2841637457 }],
  ["hires", 321.8122, {
    y1: 0.7371312573325668e-3,
    y2: 0.1442485726316185e-3,
    y3: 0.5888729740967575e-4,
    y4: 0.1175651343283149e-2,
    y5: 0.2386356198831331e-2,
    y6: 0.6238968252742796e-2,
    y7: 0.2849998395185769e-2,
    y8: 0.2850001604814231e-2,
  }],
  ["pollu", 60, {
    y1: 0.05646255480022769,
    y2: 0.1342484130422339,
    y3: 4.139734331099427e-9,
    y4: 0.005523140207484359,
    y8: 0.3245075353396018,
    y10: 1.622293157301561e-8,
    y16: 4.352846369330103e-18,
    y20: 5.682943292316392e-5,
  }],
];

describe.each(["rosenbrock", "bdf"] as const)("%s at rtol 1e-7", (method) => {
  test.each(PUBLISHED)("%s at t = %d s", (name, time, expected) => {
    const p = problem(name);
    const { mechanism, rateConstants, initial } = prepare(p);
    const run = simulate(mechanism, {
      rateConstants,
      initial,
      times: [time],
      rtol: 1e-7,
      atol: 1e-7 * p.atolFactor,
      method,
    });
    for (const [species, value] of Object.entries(expected)) {
      expect(Math.abs(run.concentration(species)[0] / value - 1), species).toBeLessThan(1e-5);
    }
  });
});

const PROBLEMS = ["robertson", "e5", "orego", "hires", "ring10", "pollu", "chain50", "random100"];

describe.each([1e-4, 1e-6])("the delivered error is at most 10 times rtol = %d", (rtol) => {
  test.each(PROBLEMS)("%s", (name) => {
    const p = problem(name);
    const run = solve(p, prepare(p), rtol);
    expect(run.finished).toBe(true);
    const errors = errorsAt(p, run);
    expect(Math.max(...errors)).toBeLessThanOrEqual(10 * rtol);
    expect(deliveredError(p, errors)).toBeGreaterThan(0);
  });
});
