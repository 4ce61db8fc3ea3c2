import fc from "fast-check";
import { Matrix, SingularValueDecomposition } from "ml-matrix";
import { describe, expect, test } from "vitest";
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { CompiledNetwork } from "../../lib/simulation/compiled_network.ts";
import type { Kernel } from "../../lib/simulation/kernel.ts";
import { simulate } from "../../lib/simulation/simulate.ts";
import type { Trajectory } from "../../lib/simulation/trajectory.ts";
import { type ReversibleNetwork, reversibleNetwork } from "./reversible_network.ts";

const METHODS = ["rosenbrock", "bdf"] as const;
/** Long after the slowest step of the random networks has come to rest, s. */
const REST = 1e7;
const KERNELS = ["all", "rates", "none"] as const;

function run(
  { mechanism, rateConstants, initial }: ReversibleNetwork,
  method: typeof METHODS[number],
  rtol: number,
  times: number[],
): Trajectory {
  const trajectory = simulate(mechanism, { rateConstants, initial, times, rtol, method });
  expect(trajectory.finished, trajectory.reason).toBe(true);
  return trajectory;
}

/** Largest difference between the concentrations of two runs, relative to them. */
function apart(a: Trajectory, b: Trajectory): number {
  return Math.max(...a.mechanism.species.map((species) => {
    const [one, other] = [a.concentration(species), b.concentration(species)];
    const floor = 1e-6 * Math.max(...one.map(Math.abs));
    return Math.max(...one.map((v, i) => Math.abs(v - other[i]) / (Math.abs(v) + floor)));
  }));
}

describe.each(METHODS)("%s over random reversible networks", (method) => {
  test("keeps the elements to 1e-10, and finds every conserved sum", () => {
    fc.assert(
      fc.property(reversibleNetwork(), (network) => {
        const { mechanism, initial, composition } = network;
        // drift grows with the step over the fastest relaxation time: 1e-12 here, up to 6e-10 at 1e4 s (measured)
        const trajectory = run(network, method, 1e-4, [0.01, 1, 30]);
        for (const element of [0, 1]) {
          const weights = mechanism.species.map((s) => composition[s][element]);
          const start = mechanism.species.reduce((sum, s, i) => sum + weights[i] * initial[s], 0);
          for (let at = 0; at < 3; at++) {
            const total = mechanism.species.reduce(
              (sum, s, i) => sum + weights[i] * trajectory.concentration(s)[at],
              0,
            );
            expect(Math.abs(total - start)).toBeLessThanOrEqual(1e-10 * start);
          }
        }
        const { conservedQuantities } = trajectory;
        expect(conservedQuantities.length).toBe(mechanism.species.length - rank(network));
        for (const { drift } of conservedQuantities) expect(drift).toBeLessThan(1e-10);
      }),
      { numRuns: 60 },
    );
  });

  test("comes to rest with every step at equilibrium", () => {
    fc.assert(
      fc.property(reversibleNetwork(6), (network) => {
        const trajectory = run(network, method, 1e-6, [REST]);
        network.mechanism.steps.forEach((step) => {
          const forward = step.reactants.reduce(
            (rate, { species, coefficient }) =>
              rate * trajectory.concentration(species)[0] ** coefficient,
            network.rateConstants[step.rateConstant],
          );
          const net = trajectory.stepRates(step.number)[0];
          expect(Math.abs(net), `step ${step.number}`).toBeLessThanOrEqual(1e-6 * forward);
        });
      }),
      { numRuns: 40 },
    );
  });

  test("does not hang on the order of the steps or of the species", () => {
    const shuffled = reversibleNetwork().chain((network) =>
      fc.record({
        network: fc.constant(network),
        lines: fc.shuffledSubarray([...network.lines], { minLength: network.lines.length }),
        turned: fc.array(fc.boolean(), { minLength: 24, maxLength: 24 }),
      })
    );
    fc.assert(
      fc.property(shuffled, ({ network, lines, turned }) => {
        const text = lines.map((line, i) => turned[i] ? swapSides(line) : line).join("\n");
        const other = { ...network, mechanism: parseMechanism(text) };
        const times = [0.1, 10];
        expect(apart(run(network, method, 1e-8, times), run(other, method, 1e-8, times)))
          .toBeLessThanOrEqual(1e-8);
      }),
      { numRuns: 40 },
    );
  });
});

test.each([1e-4, 1e-6, 1e-8])("both methods agree at rtol %d", (rtol) => {
  fc.assert(
    fc.property(reversibleNetwork(), (network) => {
      const times = [1e-3, 0.1, 10, 1e5];
      const [one, other] = METHODS.map((method) => run(network, method, rtol, times));
      expect(apart(one, other)).toBeLessThanOrEqual(20 * rtol);
    }),
    { numRuns: 40 },
  );
});

describe.each([false, true])("kernels, conserved sums closed: %s", (closing) => {
  test("generated code and the interpreted kernel give the same numbers", () => {
    fc.assert(
      fc.property(reversibleNetwork(), fc.double({ min: -1, max: 7, noNaN: true }), (
        network,
        decade,
      ) => {
        const compiled = new CompiledNetwork(network.mechanism, closing);
        const [all, rates, none] = KERNELS.map((generated) =>
          numbers(compiled.makeKernel(generated), constants(compiled, network), 10 ** decade)
        );
        for (const other of [all, rates]) {
          for (const key of ["rates", "slope", "Jv", "solution", "stage"] as const) {
            const size = Math.max(...none[key].map(Math.abs));
            none[key].forEach((value, i) =>
              expect(Math.abs(value - other[key][i]), key).toBeLessThanOrEqual(1e-11 * size)
            );
          }
        }
      }),
      { numRuns: 60 },
    );
  });

  test("J v is the central difference of the right side along v", () => {
    fc.assert(
      fc.property(reversibleNetwork(), (network) => {
        const compiled = new CompiledNetwork(network.mechanism, closing);
        const k = constants(compiled, network);
        for (const generated of KERNELS) {
          const kernel = compiled.makeKernel(generated);
          const [y, v] = [wave(kernel.size, 1), wave(kernel.size, 5)];
          const product = new Float64Array(kernel.size);
          kernel.linearize(y, k);
          kernel.timesJacobian(v, product);
          const at = (h: number) => {
            const slope = new Float64Array(kernel.size);
            kernel.rightSide(y.map((value, i) => value + h * v[i]), k, slope);
            return slope;
          };
          // five points are exact for polynomials of degree 3, which rates are
          const h = 0.05;
          const [a, b, c, d] = [-2 * h, -h, h, 2 * h].map(at);
          const size = Math.max(...product.map(Math.abs), ...k);
          product.forEach((value, i) => {
            const difference = (a[i] - d[i] + 8 * (c[i] - b[i])) / (12 * h);
            expect(Math.abs(value - difference)).toBeLessThanOrEqual(1e-12 * size);
          });
        }
      }),
      { numRuns: 60 },
    );
  });

  test("factor and solve undo d I − J", () => {
    fc.assert(
      fc.property(reversibleNetwork(), fc.double({ min: -1, max: 7, noNaN: true }), (
        network,
        decade,
      ) => {
        const compiled = new CompiledNetwork(network.mechanism, closing);
        const k = constants(compiled, network);
        const d = 10 ** decade;
        for (const generated of KERNELS) {
          const kernel = compiled.makeKernel(generated);
          kernel.linearize(wave(kernel.size, 1), k);
          const v = wave(kernel.size, 5);
          const x = new Float64Array(kernel.size);
          kernel.timesJacobian(v, x);
          x.forEach((value, i) => x[i] = d * v[i] - value);
          expect(kernel.factor(d)).toBe(true);
          kernel.solve(x);
          const condition = 1 + Math.max(...k) / d;
          x.forEach((value, i) =>
            expect(Math.abs(value - v[i])).toBeLessThanOrEqual(1e-13 * condition)
          );
        }
      }),
      { numRuns: 60 },
    );
  });
});

function numbers(kernel: Kernel, k: Float64Array, d: number) {
  const n = kernel.size;
  const out = {
    rates: new Float64Array(kernel.reactionCount),
    slope: new Float64Array(n),
    Jv: new Float64Array(n),
    solution: wave(n, 7),
    // a stage's right side must leave the conserved sums as they are: a slope does
    stage: new Float64Array(n),
  };
  const y = wave(n, 1);
  kernel.rates(y, k, out.rates);
  kernel.rightSide(y, k, out.slope);
  kernel.linearize(y, k);
  kernel.timesJacobian(wave(n, 5), out.Jv);
  kernel.rightSide(wave(n, 9), k, out.stage);
  expect(kernel.factor(d)).toBe(true);
  kernel.solve(out.solution);
  kernel.solveStage(wave(n, 3), k, out.stage);
  return out;
}

function constants(compiled: CompiledNetwork, network: ReversibleNetwork): Float64Array {
  const { mechanism, rateConstants } = network;
  return Float64Array.from(
    compiled.origins,
    (origin) => rateConstants[mechanism.rateConstants[origin.rateConstant]],
  );
}

/** Positive numbers between 0.2 and 0.9 without a pattern. */
function wave(n: number, phase: number): Float64Array {
  return Float64Array.from({ length: n }, (_, i) => 0.2 + 0.7 * Math.abs(Math.sin(3 * i + phase)));
}

function swapSides(line: string): string {
  const [, left, forward, reverse, right] = /^(.*) <=>\[(.*)\]\[(.*)\] (.*)$/.exec(line)!;
  return `${right} <=>[${reverse}][${forward}] ${left}`;
}

/** Rank of the stoichiometric matrix, by singular values. */
function rank({ mechanism }: ReversibleNetwork): number {
  const matrix = Matrix.zeros(mechanism.steps.length, mechanism.species.length);
  mechanism.steps.forEach(({ reactants, products }, row) => {
    for (const [side, sign] of [[reactants, -1], [products, 1]] as const) {
      for (const { species, coefficient } of side) {
        const column = mechanism.species.indexOf(species);
        matrix.set(row, column, matrix.get(row, column) + sign * coefficient);
      }
    }
  });
  return new SingularValueDecomposition(matrix, { autoTranspose: true }).rank;
}
