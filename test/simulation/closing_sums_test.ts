import { describe, expect, test } from "vitest";
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { canClose, closingSums } from "../../lib/simulation/closing_sums.ts";
import {
  compiledFor,
  CompiledNetwork,
  compiledNetwork,
} from "../../lib/simulation/compiled_network.ts";
import { networkOf } from "../../lib/simulation/reaction_network.ts";
import { simulate } from "../../lib/simulation/simulate.ts";
import { errorsAt, prepare, problem, solve } from "../bench/problems.ts";

const IONS = parseMechanism(`
  S -> P+ + N-
  N- + S <=> D-
  P+ + N- -> S
  P+ + D- -> 2 S`);

describe("a sum in which one species stands against all others", () => {
  test("is found: the cation is the sum of the anions", () => {
    const sums = closingSums(networkOf(IONS).network);
    const names = sums.map(({ closing, species }) => [
      IONS.species[closing],
      species.map((i) => IONS.species[i]).sort(),
    ]);
    expect(names).toEqual([["P+", ["D-", "N-"]]]);
  });

  test("is not made of a mass that all species share", () => {
    expect(closingSums(networkOf(parseMechanism("A -> B\nB -> C\nC + A -> 2 B")).network)).toEqual(
      [],
    );
  });

  test("is used only where no digits are lost", () => {
    const sums = closingSums(networkOf(IONS).network);
    const at = (record: Record<string, number>) =>
      Float64Array.from(IONS.species, (s) => record[s] ?? 0);
    expect(canClose(sums, at({ S: 1 }))).toBe(true);
    expect(canClose(sums, at({ S: 1, "P+": 0.1 }))).toBe(true);
    expect(canClose(sums, at({ S: 1, "N-": 0.1 }))).toBe(false);
    expect(compiledFor(IONS, { S: 1, "N-": 0.1 })).toBe(compiledNetwork(IONS));
    expect(compiledFor(IONS, { S: 1 })).not.toBe(compiledNetwork(IONS));
    expect(compiledFor(IONS, { S: 1 })).toBe(compiledFor(IONS, { S: 2 }));
  });

  test("gives the same solutions of (d I − J) x = b as the full equations, in both kernels", () => {
    const solved = [false, true].flatMap((closing) =>
      (["none", "rates", "all"] as const).map((generated) => {
        const compiled = new CompiledNetwork(IONS, closing);
        const kernel = compiled.makeKernel(generated);
        const y = new Float64Array(kernel.size);
        const b = new Float64Array(kernel.size);
        IONS.species.forEach((_, i) => {
          y[compiled.place[i]] = 0.1 + 0.2 * i;
          b[compiled.place[i]] = Math.cos(i);
        });
        const k = Float64Array.from({ length: kernel.reactionCount }, (_, j) => 1 + j);
        kernel.linearize(y, k);
        expect(kernel.factor(3)).toBe(true);
        kernel.solve(b);
        const stage = new Float64Array(kernel.size);
        kernel.solveStage(y, k, stage);
        return IONS.species.flatMap((_, i) => [b[compiled.place[i]], stage[compiled.place[i]]]);
      })
    );
    for (const other of solved.slice(1)) {
      other.forEach((value, i) => expect(value).toBeCloseTo(solved[0][i], 12));
    }
  });
});

describe.each(["rosenbrock", "bdf"] as const)("%s", (method) => {
  test.each([1e-4, 1e-6, 1e-8])("e5 is right at every output up to 1e13 s, at rtol %d", (rtol) => {
    const p = problem("e5");
    const run = solve(p, prepare(p), rtol, method);
    expect(run.finished).toBe(true);
    expect(Math.max(...errorsAt(p, run))).toBeLessThanOrEqual(10 * rtol);
    for (const { drift } of run.conservedQuantities) expect(drift).toBeLessThan(1e-15);
  });

  test("charge is kept to the last digit while it falls by ten powers of ten", () => {
    const run = simulate(IONS, {
      rateConstants: { k1: 1e-9, k2: 1e6, "k-2": 1e3, k3: 1e9, k4: 1e9 },
      initial: { S: 1e-3 },
      times: [1, 1e3, 1e6, 1e9, 1e11],
      method,
    });
    expect(run.finished).toBe(true);
    const [p, n, d] = ["P+", "N-", "D-"].map((s) => run.concentration(s));
    p.forEach((value, i) => expect(Math.abs(value / (n[i] + d[i]) - 1)).toBeLessThan(1e-15));
  });
});
