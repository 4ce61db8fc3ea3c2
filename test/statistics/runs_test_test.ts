import { describe, expect, test } from "vitest";
import { runsTest } from "../../lib/statistics/runs_test.ts";

/** Every order of `above` plus and `below` minus signs. */
function orders(above: number, below: number): number[][] {
  if (above === 0 && below === 0) return [[]];
  return [
    ...(above > 0 ? orders(above - 1, below).map((rest) => [1, ...rest]) : []),
    ...(below > 0 ? orders(above, below - 1).map((rest) => [-1, ...rest]) : []),
  ];
}

function countRuns(signs: readonly number[]): number {
  return signs.filter((sign, i) => i === 0 || sign !== signs[i - 1]).length;
}

describe("the probability is the share of all orders with as few runs", () => {
  test.each([[1, 1], [2, 3], [4, 4], [5, 4], [1, 7], [6, 6]])(
    "%d above and %d below",
    (above, below) => {
      const all = orders(above, below);
      const runs = all.map(countRuns);
      for (const order of all.slice(0, 40)) {
        const result = runsTest(order);
        const share = runs.filter((r) => r <= countRuns(order)).length / all.length;
        expect(result.runs).toBe(countRuns(order));
        expect(result.probability).toBeCloseTo(share, 10);
      }
    },
  );
});

test("crystal violet, + − − + + + + − −: four runs of five above and four below", () => {
  // By hand: of the 126 orders, 2 + 7 + 24 have 2, 3, 4 runs.
  const result = runsTest([1, -1, -1, 1, 1, 1, 1, -1, -1]);
  expect(result).toMatchObject({ runs: 4, above: 5, below: 4 });
  expect(result.probability).toBeCloseTo(33 / 126, 12);
});

test("residuals of 0 are left out", () => {
  expect(runsTest([1, 0, 1, -1, 0])).toMatchObject({ runs: 2, above: 2, below: 1 });
});

test("no residuals, or all on one side", () => {
  expect(runsTest([]).probability).toBe(1);
  // Five tosses of a coin on one side, whichever it is: 2·2⁻⁵.
  expect(runsTest([1, 2, 3, 4, 5]).probability).toBe(1 / 16);
});

test("long series stay finite", () => {
  const signs = Array.from({ length: 4000 }, (_, i) => i % 2 === 0 ? 1 : -1);
  expect(runsTest(signs).probability).toBeCloseTo(1, 6);
  expect(runsTest(signs.toSorted()).probability).toBeGreaterThanOrEqual(0);
});
