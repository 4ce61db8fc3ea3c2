import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { CompiledNetwork } from "../../lib/simulation/compiled_network.ts";
import type { InterpretedKernel } from "../../lib/simulation/interpreted_kernel.ts";
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { prepare, problem } from "../bench/problems.ts";
import { randomMechanism } from "./random_mechanism.ts";

const state = (n: number) =>
  Float64Array.from({ length: n }, (_, i) => 0.2 + 0.7 * Math.abs(Math.sin(3 * i + 1)));

function close(a: Float64Array, b: Float64Array, tolerance: number): void {
  const scale = Math.max(...a.map(Math.abs), ...b.map(Math.abs), 1e-300);
  for (let i = 0; i < a.length; i++) {
    expect(Math.abs(a[i] - b[i])).toBeLessThanOrEqual(tolerance * scale);
  }
}

describe("over random mass-conserving networks", () => {
  test("generated code and its interpreted twin agree", () => {
    fc.assert(fc.property(randomMechanism(12), ({ mechanism, rateConstants }) => {
      const compiled = new CompiledNetwork(mechanism);
      const [generated, interpreted] = [compiled.makeKernel("all"), compiled.makeKernel("none")];
      expect([generated.generated, interpreted.generated]).toEqual([true, false]);
      const k = Float64Array.from(
        compiled.origins,
        (o) => rateConstants[mechanism.rateConstants[o.rateConstant]],
      );
      const n = generated.size;
      const y = state(n);
      const run = (kernel: typeof generated) => {
        const out = {
          rates: new Float64Array(k.length),
          f: new Float64Array(n),
          Jv: new Float64Array(n),
        };
        kernel.rates(y, k, out.rates);
        kernel.rightSide(y, k, out.f);
        kernel.linearize(y, k);
        kernel.timesJacobian(state(n), out.Jv);
        expect(kernel.factor(1e4)).toBe(true);
        const x = state(n);
        kernel.solve(x);
        const stage = state(n);
        kernel.solveStage(y, k, stage);
        return { ...out, x, stage };
      };
      const a = run(generated), b = run(interpreted);
      for (const key of ["rates", "f", "Jv", "x", "stage"] as const) close(a[key], b[key], 1e-13);
    }));
  });

  test("the Jacobian is the derivative of the right side", () => {
    fc.assert(fc.property(randomMechanism(), ({ mechanism, rateConstants }) => {
      const compiled = new CompiledNetwork(mechanism);
      const kernel = compiled.makeKernel("none") as InterpretedKernel;
      const k = Float64Array.from(
        compiled.origins,
        (o) => rateConstants[mechanism.rateConstants[o.rateConstant]],
      );
      const n = kernel.size;
      const y = state(n);
      kernel.linearize(y, k);
      const dense = kernel.denseJacobian();
      const at = (j: number, step: number) => {
        const moved = y.slice();
        moved[j] += step;
        const f = new Float64Array(n);
        kernel.rightSide(moved, k, f);
        return f;
      };
      // five points: exact for the polynomials of degree 3 or less that rates are
      const h = 0.1;
      const column = new Float64Array(n);
      for (let j = 0; j < n; j++) {
        const [a, b, c, d] = [at(j, -2 * h), at(j, -h), at(j, h), at(j, 2 * h)];
        for (let i = 0; i < n; i++) column[i] = (a[i] - d[i] + 8 * (c[i] - b[i])) / (12 * h);
        close(Float64Array.from({ length: n }, (_, i) => dense[i * n + j]), column, 1e-11);
      }
    }));
  });

  test("solutions of (d I − J) x = b satisfy it", () => {
    fc.assert(
      fc.property(
        randomMechanism(12),
        fc.double({ min: -2, max: 6, noNaN: true }),
        (random, decade) => {
          const compiled = new CompiledNetwork(random.mechanism);
          const k = Float64Array.from(
            compiled.origins,
            (o) => random.rateConstants[random.mechanism.rateConstants[o.rateConstant]],
          );
          const d = Math.pow(10, decade);
          for (const generated of ["all", "rates", "none"] as const) {
            const kernel = compiled.makeKernel(generated);
            const b = state(kernel.size);
            const x = b.slice();
            kernel.linearize(state(kernel.size), k);
            if (!kernel.factor(d)) continue;
            kernel.solve(x);
            const Jx = new Float64Array(kernel.size);
            kernel.timesJacobian(x, Jx);
            const scale = Math.max(...x.map(Math.abs)) * Math.max(d, ...k) * 10 + 1;
            for (let i = 0; i < b.length; i++) {
              expect(Math.abs(d * x[i] - Jx[i] - b[i])).toBeLessThan(1e-9 * scale);
            }
          }
        },
      ),
    );
  });
});

test("code is generated for all of a small network, for the rates of a larger one, for none of a large one", () => {
  const network = (n: number, perSpecies: number) =>
    new CompiledNetwork(parseMechanism(
      Array.from({ length: perSpecies * n }, (_, i) =>
        [i, i * 7 + 3, i * 5 + 1].map((q) => `A${q % n}`))
        .filter((names) =>
          new Set(names).size === 3
        )
        .map(([a, b, c]) => `${a} + ${b} -> ${c}`).join("\n"),
    ));
  const [small, middle, large] = [network(12, 1), network(150, 2), network(700, 3)];
  expect([small, middle, large].map((c) => c.preferred)).toEqual(["all", "rates", "none"]);
  expect([small, middle, large].map((c) => c.makeKernel().generated)).toEqual([true, true, false]);
  expect([small, middle, large].map((c) => c.makeKernel().generatedFactors)).toEqual([
    true,
    false,
    false,
  ]);
});

test("code in several functions agrees with its interpreted twin", () => {
  const p = problem("random300");
  const compiled = new CompiledNetwork(prepare(p).mechanism);
  const k = Float64Array.from(p.steps, ([, value]) => value);
  const [a, b] = (["rates", "none"] as const).map((generated) => {
    const kernel = compiled.makeKernel(generated);
    const y = state(kernel.size);
    const f = new Float64Array(kernel.size);
    kernel.rightSide(y, k, f);
    kernel.linearize(y, k);
    const product = new Float64Array(kernel.size);
    kernel.timesJacobian(y, product);
    return { f, product };
  });
  close(a.f, b.f, 1e-13);
  close(a.product, b.product, 1e-13);
});
