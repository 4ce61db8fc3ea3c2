import { describe, expect, test } from "vitest";
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { CompiledNetwork } from "../../lib/simulation/compiled_network.ts";
import { eliminationOrder } from "../../lib/simulation/elimination_order.ts";
import { networkOf } from "../../lib/simulation/reaction_network.ts";
import { prepare, problem } from "../bench/problems.ts";

describe("the order of elimination", () => {
  test("names every species once", () => {
    const { network } = networkOf(prepare(problem("random100")).mechanism);
    expect([...eliminationOrder(network)].sort((a, b) => a - b)).toEqual(
      Array.from({ length: network.size }, (_, i) => i),
    );
  });
  test("leaves a species that meets all others to the end, so that nothing fills in", () => {
    const spokes = Array.from({ length: 40 }, (_, i) => `H + A${i} -> H + B${i}\nB${i} -> A${i}`);
    const { structure } = new CompiledNetwork(
      parseMechanism(`H -> G\nG -> H\n${spokes.join("\n")}`),
    );
    const entries = new Set<number>();
    for (let i = 0; i < structure.size; i++) {
      entries.add(i * structure.size + i);
      for (let q = structure.jacobianStart[i]; q < structure.jacobianStart[i + 1]; q++) {
        entries.add(i * structure.size + structure.jacobianColumn[q]);
      }
    }
    expect(structure.column.length).toBe(entries.size);
  });
});

describe("factors of a network of 300 species, rows of one pattern taken together", () => {
  const p = problem("random300");
  const compiled = new CompiledNetwork(prepare(p).mechanism);
  const kernel = compiled.makeKernel("none");
  const k = Float64Array.from(p.steps, ([, value]) => value);
  const n = kernel.size;
  const y = Float64Array.from({ length: n }, (_, i) => 0.01 + 0.01 * Math.abs(Math.sin(i)));

  test.each([1e-2, 1e2, 1e6])("(d I − J) x = b holds, d = %d", (d) => {
    const b = Float64Array.from({ length: n }, (_, i) => Math.cos(i));
    const x = b.slice();
    kernel.linearize(y, k);
    expect(kernel.factor(d)).toBe(true);
    kernel.solve(x);
    const product = new Float64Array(n);
    kernel.timesJacobian(x, product);
    const size = Float64Array.from(x, Math.abs);
    const scale = Math.max(...product.map(Math.abs), ...size.map((v) => v * d), 1);
    for (let i = 0; i < n; i++) {
      expect(Math.abs(d * x[i] - product[i] - b[i])).toBeLessThan(1e-10 * scale);
    }
  });

  test("a pivot of 0 is told", () => {
    const single = new CompiledNetwork(parseMechanism("A -> 2 A"));
    for (const generated of ["all", "none"] as const) {
      const growing = single.makeKernel(generated);
      growing.linearize(Float64Array.of(1), Float64Array.of(3));
      expect(growing.factor(3)).toBe(false);
      expect(growing.factor(4)).toBe(true);
    }
  });
});
