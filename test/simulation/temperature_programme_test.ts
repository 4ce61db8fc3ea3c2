import { describe, expect, test } from "vitest";
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { GAS_CONSTANT } from "../../lib/quantity/constants.ts";
import { simulate } from "../../lib/simulation/simulate.ts";
import { temperatureProgramme } from "../../lib/simulation/temperature_programme.ts";

const DECAY = parseMechanism("A ->[k] B");
const ENERGY = 80_000;
const FACTOR = 5e8;
const k = (T: number) => FACTOR * Math.exp(-ENERGY / (GAS_CONSTANT * T));
const EXPRESSION = { preExponentialFactor: FACTOR, activationEnergy: ENERGY / 1000 };

/** ∫k dt between two times by Simpson's rule on a fine grid. */
function integral(temperature: (t: number) => number, from: number, to: number): number {
  const n = 20_000;
  const h = (to - from) / n;
  let sum = k(temperature(from)) + k(temperature(to));
  for (let i = 1; i < n; i++) sum += (i % 2 === 1 ? 4 : 2) * k(temperature(from + i * h));
  return sum * h / 3;
}

describe("a programme", () => {
  const programme = temperatureProgramme({
    times: ["0 min", "10 min", "20 min"],
    temperatures: ["25 °C", "85 °C", "85 °C"],
  });

  test("is straight between its points and constant outside", () => {
    expect(programme.at(-5)).toBe(298.15);
    expect(programme.at(300)).toBeCloseTo(328.15, 10);
    expect(programme.at(900)).toBeCloseTo(358.15, 10);
    expect(programme.at(1e6)).toBeCloseTo(358.15, 10);
    expect(programme.slope(300)).toBeCloseTo(0.1, 12);
    expect(programme.slope(900)).toBe(0);
  });

  test("knows where it bends", () => {
    expect(programme.bends).toEqual([0, 600]);
    expect(temperatureProgramme(300).bends).toEqual([]);
  });

  test.each([
    [{ times: [0, 0], temperatures: [300, 310] }, /time 1 is 0 s after 0 s/],
    [{ times: [0], temperatures: [300, 310] }, /1 times and 2 temperatures/],
    [{ times: [0], temperatures: [-3] }, /-3 K/],
    ["10 min", /measures time/],
  ])("%j is refused", (given, message) => {
    expect(() => temperatureProgramme(given)).toThrow(message);
  });
});

describe.each(["rosenbrock", "bdf"] as const)("%s under a temperature programme", (method) => {
  const table = { times: [0, 600, 1200], temperatures: [298.15, 358.15, 328.15] };
  const programme = temperatureProgramme(table);
  const run = simulate(DECAY, {
    rateConstants: { k: EXPRESSION },
    initial: { A: 1 },
    temperature: table,
    times: [0, 200, 600, 700, 1200, 2000],
    rtol: 1e-8,
    method,
  });

  test("ln([A]₀/[A]) is the integral of k, across the bends", () => {
    expect(run.finished).toBe(true);
    const a = run.concentration("A");
    let total = 0;
    [0, 200, 600, 700, 1200, 2000].forEach((time, i, times) => {
      if (i > 0) total += integral(programme.at, times[i - 1], time);
      expect(a[i] / Math.exp(-total) - 1).toBeLessThan(1e-6);
      expect(a[i] / Math.exp(-total) - 1).toBeGreaterThan(-1e-6);
    });
  });

  test("rates of steps are those of the temperature at that time", () => {
    const rates = run.stepRates(1);
    const a = run.concentration("A");
    run.times.forEach((time, i) =>
      expect(rates[i] / (k(programme.at(time)) * a[i])).toBeCloseTo(1, 10)
    );
  });
});

test("at constant temperature an Arrhenius expression is its value", () => {
  const options = { initial: { A: 1 }, times: [0, 100, 1000] };
  const byExpression = simulate(DECAY, {
    ...options,
    rateConstants: { k: EXPRESSION },
    temperature: "60 °C",
  });
  const byValue = simulate(DECAY, { ...options, rateConstants: { k: k(333.15) } });
  expect([...byExpression.concentration("A")]).toEqual([...byValue.concentration("A")]);
});

test("a reverse constant from K brings the mixture to that equilibrium", () => {
  const exchange = parseMechanism("A <=>[kf][kr] B");
  const run = simulate(exchange, {
    rateConstants: { kf: 0.1, kr: { forward: "kf", equilibriumConstant: 4 } },
    initial: { A: 1 },
    times: [0, 1000],
  });
  expect(run.concentration("B")[1] / run.concentration("A")[1]).toBeCloseTo(4, 6);
});

test("a fall-off constant takes [M] from the initial concentrations", () => {
  const run = simulate(DECAY, {
    rateConstants: { k: { lowPressure: 2, highPressure: 4, broadening: { form: "Lindemann" } } },
    initial: { A: 1, M: 2 },
    times: [0, 0.5],
  });
  // p_r = 1: k = k∞/2 = 2.
  expect(run.concentration("A")[1]).toBeCloseTo(Math.exp(-1), 6);
});

describe("what is missing is named", () => {
  test("the temperature", () => {
    expect(() =>
      simulate(DECAY, { rateConstants: { k: EXPRESSION }, initial: { A: 1 }, times: [1] })
    ).toThrow(/"k" without a temperature/);
  });

  test("[M] of a fall-off constant", () => {
    expect(() =>
      simulate(DECAY, {
        rateConstants: { k: { lowPressure: 2, highPressure: 4 } },
        initial: { A: 1 },
        times: [1],
      })
    ).toThrow(/concentration of M is not given/);
  });

  test("the forward constant of a reverse one", () => {
    expect(() =>
      simulate(parseMechanism("A <=>[kf][kr] B"), {
        rateConstants: { kf: 1, kr: { forward: "k1", equilibriumConstant: 4 } },
        initial: { A: 1 },
        times: [1],
      })
    ).toThrow(/"k1"/);
  });
});
