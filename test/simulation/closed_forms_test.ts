import { describe, expect, test } from "vitest";
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { simulate } from "../../lib/simulation/simulate.ts";
import { bateman, batemanRounding } from "./bateman.ts";

type Values = Readonly<Record<string, number>>;
/** A mechanism, and the exact concentration of some species at a time. */
interface ClosedForm {
  readonly name: string;
  readonly steps: string;
  readonly rateConstants: Values;
  readonly initial: Values;
  readonly exact: Readonly<Record<string, (t: number) => number>>;
  /** What rounding may add to the closed form, mol/L. */
  readonly rounding?: number;
}

/** Second order with unequal concentrations: [A] = (a − b) / (1 − (b/a) exp(−(a − b) k t)), and at equal
 * ones a / (1 + a k t). */
function pair(a: number, b: number, k: number): ClosedForm {
  const gap = a - b;
  // expm1 keeps the digits where a and b are close: 1 − (b/a) e = (gap − b expm1(−gap k t)) / a
  const left = (t: number) =>
    gap === 0 ? a / (1 + a * k * t) : a * gap / (gap - b * Math.expm1(-gap * k * t));
  const other = (t: number) =>
    gap === 0 ? left(t) : b * Math.exp(-gap * k * t) * gap / (gap - b * Math.expm1(-gap * k * t));
  return {
    name: `A + B, ratio ${b / a}`,
    steps: "A + B -> P",
    rateConstants: { k1: k },
    initial: { A: a, B: b },
    exact: { A: left, B: other, P: (t) => a - left(t) },
  };
}

const CHAIN = [3, 0.2, 1.4, 0.9, 2.2, 0.5];

/** IUPAC writes no factorials: 2 A -> P runs at k [A]², so d[A]/dt = −2 k [A]². */
const CLOSED_FORMS: ClosedForm[] = [
  {
    name: "order 0, source",
    steps: "∅ -> P",
    rateConstants: { k1: 0.3 },
    initial: { P: 0.5 },
    exact: { P: (t) => 0.5 + 0.3 * t },
  },
  {
    name: "source and first-order loss",
    steps: "∅ -> P\nP -> ∅",
    rateConstants: { k1: 0.3, k2: 0.8 },
    initial: {},
    exact: { P: (t) => -0.375 * Math.expm1(-0.8 * t) },
  },
  {
    name: "order 1, loss",
    steps: "A -> ∅",
    rateConstants: { k1: 0.7 },
    initial: { A: 2 },
    exact: { A: (t) => 2 * Math.exp(-0.7 * t) },
  },
  {
    name: "order 2",
    steps: "2 A -> B",
    rateConstants: { k1: 0.4 },
    initial: { A: 1.5 },
    exact: {
      A: (t) => 1.5 / (1 + 2 * 0.4 * 1.5 * t),
      B: (t) => 0.4 * 1.5 * 1.5 * t / (1 + 2 * 0.4 * 1.5 * t),
    },
  },
  ...[[1, 1], [1, 1.001], [1, 0.6], [1, 10], [0.02, 1], [1, 0.001]].map(([a, b]) =>
    pair(a, b, 0.9)
  ),
  {
    name: "reversible",
    steps: "A <=> B",
    rateConstants: { k1: 0.5, "k-1": 0.25 },
    initial: { A: 1, B: 0.1 },
    exact: {
      A: (t) => (1.1 + (3 - 1.1) * Math.exp(-0.75 * t)) / 3,
      B: (t) => (2.2 - (3 - 1.1) * Math.exp(-0.75 * t)) / 3,
    },
  },
  {
    name: "parallel",
    steps: "A -> B\nA -> C\nA -> D",
    rateConstants: { k1: 0.3, k2: 0.6, k3: 1e-4 },
    initial: { A: 1 },
    exact: {
      A: (t) => Math.exp(-0.9001 * t),
      B: (t) => -0.3 / 0.9001 * Math.expm1(-0.9001 * t),
      C: (t) => -0.6 / 0.9001 * Math.expm1(-0.9001 * t),
      D: (t) => -1e-4 / 0.9001 * Math.expm1(-0.9001 * t),
    },
  },
  {
    name: "chain of 6",
    steps: CHAIN.map((_, i) => i < 5 ? `X${i + 1} -> X${i + 2}` : "X6 -> ∅").join("\n"),
    rateConstants: Object.fromEntries(CHAIN.map((k, i) => [`k${i + 1}`, k])),
    initial: { X1: 2 },
    exact: Object.fromEntries(CHAIN.map((_, i) => [`X${i + 1}`, (t) => 2 * bateman(CHAIN, i, t)])),
    rounding: 2 * Math.max(...CHAIN.map((_, i) => batemanRounding(CHAIN, i))),
  },
  {
    name: "autocatalytic",
    steps: "A + B -> 2 B",
    rateConstants: { k1: 1.1 },
    initial: { A: 1, B: 1e-3 },
    exact: {
      A: (t) => 1.001 / (1 + 1e-3 * Math.exp(1.1 * 1.001 * t)),
      B: (t) => 1.001 / (1 + 1e3 * Math.exp(-1.1 * 1.001 * t)),
    },
  },
];

/** The error is |c − exact| / (exact + this times the largest exact concentration of the species), as for
 * the published problems: a solver of relative tolerance adds up its errors along an exponential decay. */
const FLOOR = 1e-10;
const TIMES = [0, 0.01, 0.1, 0.5, 1, 1.01, 1.02, 3, 7, 12];

describe.each(["rosenbrock", "bdf"] as const)("%s", (method) => {
  describe.each([1e-4, 1e-6, 1e-8])("at rtol %d", (rtol) => {
    test.each(CLOSED_FORMS)("$name", ({ steps, rateConstants, initial, exact, rounding = 0 }) => {
      const mechanism = parseMechanism(steps);
      const run = simulate(mechanism, { rateConstants, initial, times: TIMES, rtol, method });
      expect(run.finished, run.reason).toBe(true);
      for (const [species, value] of Object.entries(exact)) {
        const expected = TIMES.map(value);
        const largest = Math.max(...expected);
        run.concentration(species).forEach((concentration, i) => {
          const difference = Math.max(0, Math.abs(concentration - expected[i]) - rounding);
          const error = difference / (expected[i] + FLOOR * largest || 1);
          expect(error, `[${species}] at ${TIMES[i]} s`).toBeLessThanOrEqual(10 * rtol + 1e-14);
        });
      }
    });
  });

  test("members of a chain grow as t to the number of steps before them", () => {
    // at short times [X6] = 2 (k1 k2 k3 k4 k5) t^5 / 5!, by the first term of Bateman's solution
    const chain = CLOSED_FORMS.find((form) => form.name === "chain of 6")!;
    const t = 1e-6;
    const run = simulate(parseMechanism(chain.steps), {
      rateConstants: chain.rateConstants,
      initial: chain.initial,
      times: [t],
      rtol: 1e-6,
      atol: 1e-60,
      method,
    });
    const first = 2 * CHAIN.slice(0, 5).reduce((product, k) => product * k * t, 1) / 120;
    expect(Math.abs(run.concentration("X6")[0] / first - 1)).toBeLessThan(1e-5);
  });
});
