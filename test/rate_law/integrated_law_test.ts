import fc from "fast-check";
import { describe, expect, test } from "vitest";
import {
  halfLivesFollowed,
  remainingFraction,
  timeToFraction,
} from "../../lib/rate_law/integrated_law.ts";
import { correctDigits, reference } from "../reference/reference.ts";

const order = fc.double({ min: -2, max: 4, noNaN: true });
const turns = fc.double({ min: 1e-3, max: 5, noNaN: true });

describe("remainingFraction", () => {
  test("is the closed form for orders 0, 1, 2 and 1.5", () => {
    // Integration of −dc/dt = kcⁿ by hand.
    expect(remainingFraction(0, 0.3, 2)).toBeCloseTo(1 - 0.6, 14);
    expect(remainingFraction(1, 0.3, 2)).toBeCloseTo(Math.exp(-0.6), 14);
    expect(remainingFraction(2, 0.3, 2)).toBeCloseTo(1 / 1.6, 14);
    expect(remainingFraction(1.5, 0.3, 2)).toBeCloseTo(1 / 1.3 ** 2, 14);
  });

  test("obeys df/dt = −κ fⁿ", () => {
    fc.assert(fc.property(order, turns, (n, t) => {
      const f = remainingFraction(n, 1, t);
      fc.pre(f > 0.05);
      const h = 1e-5 * t;
      const slope = (remainingFraction(n, 1, t + h) - remainingFraction(n, 1, t - h)) / (2 * h);
      expect(slope).toBeCloseTo(-(f ** n), 5);
    }));
  });

  test("is smooth in the order at 1", () => {
    for (const d of [1e-3, 1e-6, 1e-9, 1e-12]) {
      const below = remainingFraction(1 - d, 0.7, 2);
      const above = remainingFraction(1 + d, 0.7, 2);
      const slope = (above - below) / (2 * d);
      // d ln f/dn at n = 1 is (κt)²/2, from the series of ln(1 + x).
      if (d > 1e-8) expect(slope / Math.exp(-1.4)).toBeCloseTo(1.4 ** 2 / 2, 4);
      expect(below).toBeCloseTo(above, 2);
    }
  });

  test("is used up in finite time below order 1, and stays at 0", () => {
    expect(remainingFraction(0, 1, 1)).toBe(0);
    expect(remainingFraction(0.5, 1, 2)).toBe(0);
    expect(remainingFraction(0, 1, 3)).toBe(0);
  });

  test("diverges where a negative κ has made the law blow up", () => {
    expect(remainingFraction(2, -1, 1)).toBe(Infinity);
  });
});

describe("timeToFraction", () => {
  test("is the inverse of remainingFraction", () => {
    fc.assert(fc.property(order, fc.double({ min: 0.05, max: 0.99, noNaN: true }), (n, f) => {
      expect(remainingFraction(n, 0.8, timeToFraction(n, 0.8, f))).toBeCloseTo(f, 10);
    }));
  });

  test("published half-lives and times to a conversion", () => {
    interface HalfLife {
      id: string;
      data: { k: number; fraction?: number; concentration?: number; runs?: number[][] };
      recomputed: { halfLife?: number; time?: number; concentrations?: number[] };
      publishedResult: { halfLife?: number; time?: number };
      source: string;
    }
    const { sets } = reference<{ sets: HalfLife[] }>("half_lives.json");
    for (const { id, data, recomputed } of sets) {
      // Orders by the source: second order where a concentration enters.
      if (data.concentration !== undefined) {
        const t = timeToFraction(2, data.k * data.concentration, 0.5);
        expect(correctDigits(t, recomputed.halfLife!), id).toBeGreaterThan(8);
      } else if (data.runs) {
        data.runs.forEach(([c0, t], i) => {
          const c = c0 * remainingFraction(2, data.k * c0, t);
          expect(correctDigits(c, recomputed.concentrations![i]), id).toBeGreaterThan(8);
        });
      } else {
        const t = timeToFraction(1, data.k, 1 - data.fraction!);
        expect(correctDigits(t, recomputed.time!), id).toBeGreaterThan(8);
      }
    }
    expect(sets.length).toBe(4);
  });
});

test("half-lives followed count halvings", () => {
  expect(halfLivesFollowed(0.25)).toBe(2);
  expect(halfLivesFollowed(0)).toBe(Infinity);
});
