import { describe, expect, test } from "vitest";
import { RODAS5P } from "../../lib/simulation/rodas5p_tableau.ts";

// Order conditions of Rosenbrock methods: E. Hairer and G. Wanner, Solving ordinary differential
// equations II, 2nd ed., Springer 1996, sec. IV.7, theorem 7.7: for each rooted tree, Σ b_i Φ_i = 1/γ(t),
// where a vertex with one child takes β = α + γ, and one with more children takes α.

type Tree = readonly Tree[];
const size = (t: Tree): number => 1 + t.reduce((sum, child) => sum + size(child), 0);
const density = (t: Tree): number =>
  size(t) * t.reduce((product, child) => product * density(child), 1);

/** Every rooted tree of a number of vertices, once. */
function trees(vertices: number): Tree[] {
  const forests = (total: number, largest: number, last: number): Tree[][] => {
    if (total === 0) return [[]];
    const out: Tree[][] = [];
    for (let first = Math.min(total, largest); first >= 1; first--) {
      const all = trees(first);
      const from = first === largest ? last : all.length - 1;
      for (let q = from; q >= 0; q--) {
        for (const rest of forests(total - first, first, q)) out.push([all[q], ...rest]);
      }
    }
    return out;
  };
  return forests(vertices - 1, vertices - 1, lastTree(vertices - 1));
}

function lastTree(vertices: number): number {
  return vertices < 1 ? 0 : trees(vertices).length - 1;
}

const s = RODAS5P.a.length;
const zeros = () => Array.from({ length: s }, () => new Array<number>(s).fill(0));
const multiply = (x: number[][], y: number[][]) =>
  x.map((row) => row.map((_, j) => row.reduce((sum, v, q) => sum + v * y[q][j], 0)));

/** Γ = (I/γ − C)⁻¹ by forward substitution, then α = A Γ and b = m Γ. */
function classicalForm() {
  const Gamma = zeros();
  for (let column = 0; column < s; column++) {
    for (let i = column; i < s; i++) {
      let sum = i === column ? 1 : 0;
      for (let j = column; j < i; j++) sum += RODAS5P.c[i][j] * Gamma[j][column];
      Gamma[i][column] = RODAS5P.gamma * sum;
    }
  }
  const A = RODAS5P.a.map((row) => [...row, ...new Array<number>(s - row.length).fill(0)]);
  const alpha = multiply(A, Gamma);
  const beta = alpha.map((row, i) => row.map((v, j) => v + Gamma[i][j]));
  const weights = (last: number) => {
    const m = [...RODAS5P.a[last], 1, ...new Array<number>(s - last - 1).fill(0)];
    return Gamma[0].map((_, j) => m.reduce((sum, v, i) => sum + v * Gamma[i][j], 0));
  };
  return { Gamma, alpha, beta, b: weights(s - 1), embedded: weights(s - 2) };
}

const { Gamma, alpha, beta, b, embedded } = classicalForm();

function elementary(t: Tree): number[] {
  return Array.from({ length: s }, (_, i) =>
    t.reduce((product, child) => {
      const matrix = t.length === 1 ? beta : alpha;
      const inner = elementary(child);
      return product * matrix[i].reduce((sum, v, j) => sum + v * inner[j], 0);
    }, 1));
}
const condition = (weights: number[], t: Tree) =>
  elementary(t).reduce((sum, phi, i) => sum + weights[i] * phi, 0) * density(t);

describe("Rodas5P", () => {
  test("there are as many trees as there should be: 1, 1, 2, 4, 9, 20", () => {
    expect([1, 2, 3, 4, 5, 6].map((q) => trees(q).length)).toEqual([1, 1, 2, 4, 9, 20]);
  });
  test.each([1, 2, 3, 4, 5])("meets the conditions of order %i", (order) => {
    for (const t of trees(order)) expect(condition(b, t)).toBeCloseTo(1, 11);
  });
  test("does not meet those of order 6", () => {
    expect(trees(6).some((t) => Math.abs(condition(b, t) - 1) > 1e-3)).toBe(true);
  });
  test.each([1, 2, 3, 4])("its embedded method meets the conditions of order %i", (order) => {
    for (const t of trees(order)) expect(condition(embedded, t)).toBeCloseTo(1, 11);
  });
  test("its embedded method does not meet those of order 5", () => {
    expect(trees(5).some((t) => Math.abs(condition(embedded, t) - 1) > 1e-3)).toBe(true);
  });
  test("nodes and time factors are the row sums of α and Γ", () => {
    for (let i = 0; i < s; i++) {
      expect(alpha[i].reduce((x, y) => x + y, 0)).toBeCloseTo(RODAS5P.nodes[i], 12);
      expect(Gamma[i].reduce((x, y) => x + y, 0)).toBeCloseTo(RODAS5P.timeFactors[i], 12);
    }
  });
  test("is stiffly accurate: the last row of β is b, so R(∞) = 0", () => {
    for (let j = 0; j < s; j++) expect(beta[s - 1][j]).toBeCloseTo(b[j], 12);
  });
});
