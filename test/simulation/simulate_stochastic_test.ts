import { describe, expect, test } from "vitest";
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { simulateStochastic } from "../../lib/simulation/simulate_stochastic.ts";

const METHODS = ["direct", "next-reaction", "tau-leaping"] as const;

function moments(values: readonly number[]): { mean: number; variance: number } {
  const mean = values.reduce((sum, v) => sum + v, 0) / values.length;
  const squares = values.reduce((sum, v) => sum + (v - mean) ** 2, 0);
  return { mean, variance: squares / (values.length - 1) };
}

/** Mean and variance that leaps kτ = ε = 0.03 (33 of them, and one of 0.01) give of themselves: each takes a
 * Poisson number with mean kτ·n. */
function leapingDecay(): { mean: number; variance: number } {
  let [mean, variance] = [1000, 0];
  for (const h of [...new Array<number>(33).fill(0.03), 0.01]) {
    variance = (1 - h) ** 2 * variance + h * mean;
    mean *= 1 - h;
  }
  return { mean, variance };
}

describe.each(METHODS)("%s", (method) => {
  test("A → B: mean 367.88 and variance 232.54 of 1000 at t = 10, k = 0.1", () => {
    // The number left is binomial with p = e⁻¹: mean 1000·p, variance 1000·p(1 − p).
    const decay = parseMechanism("A ->[k] B");
    const left = Array.from({ length: 2000 }, (_, seed) =>
      simulateStochastic(decay, {
        rateConstants: { k: 0.1 },
        initial: { A: 1000 },
        times: [10],
        method,
        seed: seed + 1,
      }).count("A")[0]);
    const { mean, variance } = moments(left);
    const count = left.length;
    const expected = method === "tau-leaping" ? leapingDecay() : { mean: 367.88, variance: 232.54 };
    expect(Math.abs(mean - expected.mean)).toBeLessThan(4 * Math.sqrt(232.54 / count));
    expect(Math.abs(variance - expected.variance)).toBeLessThan(4 * 232.54 * Math.sqrt(2 / count));
  });

  test("A ⇌ B: binomial at equilibrium, and nothing is lost", () => {
    const exchange = parseMechanism("A <=>[kf][kr] B");
    const found = Array.from({ length: 400 }, (_, seed) => {
      const run = simulateStochastic(exchange, {
        rateConstants: { kf: 2, kr: 1 },
        initial: { A: 300 },
        times: [0, 5, 10],
        method,
        seed: seed + 1,
      });
      const [a, b] = [run.count("A"), run.count("B")];
      a.forEach((n, i) => expect(n + b[i]).toBe(300));
      return a[2];
    });
    const { mean, variance } = moments(found);
    // p = kr/(kf + kr) = 1/3: mean 100, variance 300·(1/3)(2/3) = 66.7.
    expect(Math.abs(mean - 100)).toBeLessThan(
      4 * Math.sqrt(66.7 / 400) + (method === "tau-leaping" ? 1 : 0),
    );
    expect(variance).toBeGreaterThan(66.7 * 0.7);
    expect(variance).toBeLessThan(66.7 * 1.3);
  });

  test("copy numbers stay whole and never negative", () => {
    const chain = parseMechanism("A + B ->[k1] C\n2 C ->[k2] D\nD ->[k3] A");
    const run = simulateStochastic(chain, {
      rateConstants: { k1: 0.01, k2: 0.02, k3: 0.5 },
      initial: { A: 400, B: 300 },
      times: Array.from({ length: 40 }, (_, i) => i * 0.5),
      method,
      seed: 11,
    });
    expect(run.finished).toBe(true);
    for (const name of run.species) {
      for (const n of run.count(name)) expect(Number.isInteger(n) && n >= 0).toBe(true);
    }
  });
});

/** Probabilities of n = N, N − 2, … under 2 A → B with a = c n(n − 1)/2, by the master equation in small
 * Euler steps with Richardson extrapolation. */
function dimerisation(N: number, c: number, time: number): number[] {
  const states = Math.floor(N / 2) + 1;
  const rate = (i: number) => c * (N - 2 * i) * (N - 2 * i - 1) / 2;
  const solve = (steps: number) => {
    let p = new Float64Array(states);
    p[0] = 1;
    const h = time / steps;
    for (let s = 0; s < steps; s++) {
      const next = new Float64Array(states);
      for (let i = 0; i < states; i++) {
        next[i] = p[i] * (1 - h * rate(i)) + (i > 0 ? p[i - 1] * h * rate(i - 1) : 0);
      }
      p = next;
    }
    return p;
  };
  const [coarse, fine] = [solve(40_000), solve(80_000)];
  return Array.from(fine, (value, i) => 2 * value - coarse[i]);
}

test.each(["direct", "next-reaction"] as const)(
  "%s: 2 A → B follows the master equation",
  (method) => {
    const [N, c, time] = [12, 0.1, 0.6];
    const expected = dimerisation(N, c, time);
    const seen = new Float64Array(expected.length);
    const trials = 20_000;
    const pair = parseMechanism("2 A ->[c] B");
    for (let seed = 1; seed <= trials; seed++) {
      const run = simulateStochastic(pair, {
        rateConstants: { c },
        initial: { A: N },
        times: [time],
        method,
        seed,
      });
      seen[(N - run.count("A")[0]) / 2]++;
    }
    let chiSquare = 0;
    let cells = 0;
    expected.forEach((p, i) => {
      if (p * trials < 10) return;
      chiSquare += (seen[i] - p * trials) ** 2 / (p * trials);
      cells++;
    });
    expect(cells).toBeGreaterThan(3);
    expect(chiSquare).toBeLessThan(cells + 5 * Math.sqrt(2 * cells));
  },
);

test("with a volume the constants are those of concentrations", () => {
  // 2 A → B, v = k[A]²: −d[A]/dt = 2k[A]², so that [A] = [A]₀/(1 + 2k[A]₀t) for many copies.
  const volume = 1e-15;
  const copies = 60_000;
  const c0 = copies / (6.02214076e23 * volume);
  const k = 1e6;
  const time = 1 / (2 * k * c0);
  const run = simulateStochastic(parseMechanism("2 A ->[k] B"), {
    rateConstants: { k },
    initial: { A: copies },
    volume,
    times: [time],
    method: "tau-leaping",
  });
  expect(Math.abs(run.count("A")[0] / copies - 0.5)).toBeLessThan(0.01);
  expect(run.steps).toBeLessThan(run.events / 10);
});

test("the same seed gives the same course, another one another", () => {
  const run = (seed: number) =>
    simulateStochastic(parseMechanism("A ->[k] B"), {
      rateConstants: { k: 1 },
      initial: { A: 50 },
      times: [0.1, 0.5, 1],
      seed,
    }).count("A");
  expect(run(4)).toEqual(run(4));
  expect([...run(4)]).not.toEqual([...run(5)]);
});

describe("honest ends", () => {
  test("a limit of steps", () => {
    const run = simulateStochastic(parseMechanism("A <=>[kf][kr] B"), {
      rateConstants: { kf: 1, kr: 1 },
      initial: { A: 1000 },
      times: [0, 1e6],
      maxSteps: 5000,
    });
    expect(run.finished).toBe(false);
    expect(run.times.length).toBe(1);
    expect(run.reason).toMatch(/5000 steps at t = /);
    expect(run.cautions[0].severity).toBe("serious");
  });

  test("nothing left to happen is an end like any other", () => {
    const run = simulateStochastic(parseMechanism("A ->[k] B"), {
      rateConstants: { k: 1 },
      initial: { A: 3 },
      times: [0, 1e9],
    });
    expect(run.finished).toBe(true);
    expect([...run.count("B")]).toEqual([0, 3]);
  });

  test.each([
    [{ rateConstants: {} }, /rate constant "k" has no value/],
    [{ rateConstants: { k: 1, k2: 1 } }, /no rate constant "k2"; it has k/],
    [{ initial: { X: 1 } }, /no species "X"; it has A, B/],
    [{ initial: { A: 1.5 } }, /whole number/],
    [{ times: [2, 1] }, /runs backwards at output 1/],
    [{ methd: "direct" }, /did you mean "method"/],
  ])("%j is refused with what to do", (change, message) => {
    const options = { rateConstants: { k: 1 }, initial: { A: 1 }, times: [1], ...change };
    // deno-lint-ignore no-explicit-any
    expect(() => simulateStochastic(parseMechanism("A ->[k] B"), options as any)).toThrow(message);
  });

  test("a third body has no copy number", () => {
    expect(() =>
      simulateStochastic(parseMechanism("A + M ->[k] B + M"), {
        rateConstants: { k: 1 },
        initial: { A: 1 },
        times: [1],
      })
    ).toThrow(/step 1: its third body M/);
  });
});
