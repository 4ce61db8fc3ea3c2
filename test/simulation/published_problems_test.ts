import { describe, expect, test } from "vitest";
import { errorsAt, prepare, problem, solve } from "../bench/problems.ts";
import { reference } from "../reference/reference.ts";

// Definitions: Test Set for IVP Solvers, release 2.4 (F. Mazzia and C. Magherini, University of Bari,
// 2008) for Robertson, HIRES and POLLU; W. H. Enright, T. E. Hull and B. Lindberg, BIT 15 (1975) 10,
// for E5. test/reference/simulation/README.md says how the reference solutions were computed.
const PROBLEMS = ["robertson", "hires", "pollu", "e5"];
const TOLERANCES = [1e-4, 1e-6, 1e-8];
const METHODS = ["rosenbrock", "bdf"] as const;

describe.each(METHODS)("%s", (method) => {
  describe.each(TOLERANCES)("at rtol %d", (rtol) => {
    test.each(PROBLEMS)("%s keeps 10 times the tolerance at every output time", (name) => {
      const p = problem(name);
      const run = solve(p, prepare(p), rtol, method);
      expect(run.finished, run.reason).toBe(true);
      expect(run.cautions).toEqual([]);
      expect([...run.times]).toEqual([...p.times]);
      errorsAt(p, run).forEach((error, at) => {
        expect(error, `at t = ${p.times[at]} s`).toBeLessThanOrEqual(10 * rtol);
      });
    });
  });

  test.each(PROBLEMS)("%s: the error follows the tolerance", (name) => {
    const p = problem(name);
    const [loose, tight] = [1e-4, 1e-8].map((rtol) =>
      Math.max(...errorsAt(p, solve(p, prepare(p), rtol, method)))
    );
    expect(tight).toBeLessThan(1e-2 * loose);
  });

  test("E5 keeps [y2] = [y3] + [y4] where both have fallen by ten orders of magnitude", () => {
    const p = problem("e5");
    const run = solve(p, prepare(p), 1e-6, method);
    const [y2, y3, y4] = ["y2", "y3", "y4"].map((name) => run.concentration(name));
    p.times.forEach((time, at) => {
      const difference = Math.abs(y2[at] - y3[at] - y4[at]);
      expect(difference, `at t = ${time} s`).toBeLessThanOrEqual(1e-15 * Math.abs(y2[at]));
    });
  });
});

/** Final values as published, and the computed solution they are set beside. */
interface WithPublished {
  readonly reference: {
    readonly y: readonly (readonly number[])[];
    readonly published: { readonly t: number; readonly values: readonly number[] };
  };
}

test.each(["robertson", "hires", "pollu"])(
  "%s: the reference solution ends on the published values (recalled from memory)",
  (name) => {
    const { published, y } = reference<WithPublished>(`simulation/${name}.json`).reference;
    const { times } = problem(name);
    const end = y[times.indexOf(published.t)];
    // the reference keeps 12 digits, of Robertson's the computation keeps 11
    end.forEach((value, i) => {
      expect(Math.abs(value / published.values[i] - 1)).toBeLessThan(1e-11);
    });
  },
);

// The sums that the equations conserve, derived by hand from the published steps.
const CONSERVED: [string, Record<string, number>][] = [
  ["robertson", { A: 1, B: 1, C: 1 }],
  ["hires", { y7: 1, y8: 1 }],
  ["e5", { y2: -1, y3: 1, y4: 1 }],
];

test.each(CONSERVED)("%s: the conserved sum of the equations is found", (name, weights) => {
  const p = problem(name);
  const run = solve(p, prepare(p), 1e-4);
  expect(run.conservedQuantities.map((q) => q.weights)).toEqual([weights]);
  expect(run.conservedQuantities[0].drift).toBeLessThan(1e-12);
});
