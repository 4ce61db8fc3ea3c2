import fc from "fast-check";
import prand from "pure-rand";
import { describe, expect, test } from "vitest";
import { GAS_CONSTANT } from "../../lib/quantity/constants.ts";
import { Estimate } from "../../lib/quantity/estimate.ts";
import { fitArrhenius } from "../../lib/temperature/fit_arrhenius.ts";
import { correctDigits, reference } from "../reference/reference.ts";

interface ArrheniusSet {
  id: string;
  kind: string;
  data: { T: number[]; k: number[] };
  units: { k: string };
  recomputed: {
    Ea_kJ_per_mol: number;
    seEa_kJ_per_mol: number;
    lnA: number;
    seLnA: number;
    A: number;
  };
}

const sets = reference<{ sets: ArrheniusSet[] }>("arrhenius.json").sets;

/** Rate constants that lie on a line exactly. */
function onLine(energy: number, a: number, temperatures: readonly number[]) {
  return temperatures.map((temperature) => ({
    temperature,
    rateConstant: a * Math.exp(-energy / (GAS_CONSTANT * temperature)),
  }));
}

// OpenStax, Chemistry 2e, section 12.5, and the others named in the file; unweighted ln k lines.
test.each(
  sets.filter((set) => set.kind === "arrhenius-fit" && set.recomputed.lnA !== undefined)
    .map((set) => [set.id, set] as const),
)("%s: Ea, ln A and their standard errors", (_, set) => {
  const rows = set.data.T.map((temperature, i) => ({ temperature, rateConstant: set.data.k[i] }));
  const fit = fitArrhenius(rows);
  const { recomputed } = set;
  expect(correctDigits(fit.activationEnergy.value, recomputed.Ea_kJ_per_mol)).toBeGreaterThan(7);
  expect(correctDigits(fit.activationEnergy.standardError, recomputed.seEa_kJ_per_mol))
    .toBeGreaterThan(6);
  expect(correctDigits(Math.log(fit.preExponentialFactor.value), recomputed.lnA))
    .toBeGreaterThan(7);
  expect(correctDigits(Math.sqrt(fit.covariance[0][0]), recomputed.seLnA)).toBeGreaterThan(6);
});

test("two rate constants give the exact activation energy, no interval, and a serious caution", () => {
  // OpenStax, Chemistry 2e, section 12.5, check on N2O5.
  const set = sets.find((s) => s.id === "arr-05-n2o5-two-point")!;
  const fit = fitArrhenius(set.data.T.map((temperature, i) => ({
    temperature,
    rateConstant: set.data.k[i],
  })));
  expect(correctDigits(fit.activationEnergy.value, set.recomputed.Ea_kJ_per_mol)).toBeGreaterThan(
    8,
  );
  expect(fit.activationEnergy.standardError).toBeNaN();
  expect(fit.cautions[0]).toMatchObject({ code: "too-few-temperatures", severity: "serious" });
});

describe("the reference temperature", () => {
  const temperatures = [298.15, 308.15, 318.15, 328.15];

  test("is the harmonic mean for equal weights: 312.75 K for 25 to 55 °C", () => {
    // Field value computed from these four temperatures: 4/Σ(1/T) = 312.75 K; and the correlation of
    // ln A and Ea there, +0.9994.
    const fit = fitArrhenius(onLine(80_000, 1e11, temperatures));
    expect(fit.referenceTemperature).toBeCloseTo(312.75, 2);
    const noisy = fitArrhenius(
      onLine(80_000, 1e11, temperatures).map((row, i) => ({
        ...row,
        rateConstant: row.rateConstant * (1 + 0.01 * (-1) ** i),
      })),
    );
    expect(noisy.correlation).toBeCloseTo(0.9994, 4);
  });

  test("removes the correlation of ln k and Ea", () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 0.005, max: 0.2, noNaN: true }), { minLength: 4, maxLength: 4 }),
        (relative) => {
          const rows = onLine(80_000, 1e11, temperatures).map((row, i) => ({
            ...row,
            standardError: relative[i] * row.rateConstant,
          }));
          const fit = fitArrhenius(rows);
          // cov(ln k_ref, Ea) from the exported covariance of ln A and Ea.
          const [[, cross], [, energy]] = fit.covariance;
          const covariance = cross - energy / (GAS_CONSTANT * fit.referenceTemperature);
          const reference = fit.rateConstantAtReference.relativeStandardError;
          expect(Math.abs(covariance / (reference * Math.sqrt(energy)))).toBeLessThan(1e-10);
        },
      ),
    );
  });

  test("u(k) far from the data needs the covariance", () => {
    const rows = onLine(80_000, 1e11, temperatures).map((row) => ({
      ...row,
      standardError: 0.02 * row.rateConstant,
    }));
    const fit = fitArrhenius(rows);
    const T = 313.15;
    const [[logA, cross], [, energy]] = fit.covariance;
    const lever = -1 / (GAS_CONSTANT * T);
    const withIt = Math.sqrt(logA + 2 * lever * cross + lever ** 2 * energy);
    const without = Math.sqrt(logA + lever ** 2 * energy);
    expect(fit.rateConstantAt(T).relativeStandardError).toBeCloseTo(withIt, 10);
    expect(without / withIt).toBeGreaterThan(20);
  });
});

test("four points from 40 to 70 °C, 3 % each: factor 1.22 at 25 °C and 1.41 at 5 °C", () => {
  // Computed beside the field notes from these inputs: s = 3 %, t with 2 degrees of freedom.
  // Residuals of 3 % that leave the line where it is: (+, −, −, +) is nearly orthogonal to it.
  const temperatures = [313.15, 323.15, 333.15, 343.15];
  const x = temperatures.map((t) => 1 / t);
  const mean = x.reduce((a, b) => a + b) / 4;
  const sxx = x.reduce((sum, v) => sum + (v - mean) ** 2, 0);
  const fit = fitArrhenius(
    onLine(80_000, 1e11, temperatures).map((row, i) => {
      const raw = [1, -1, -1, 1];
      const slope = x.reduce((sum, v, j) => sum + raw[j] * (v - mean), 0) / sxx;
      const residuals = x.map((v, j) => raw[j] - slope * (v - mean));
      const s = Math.sqrt(residuals.reduce((sum, r) => sum + r * r, 0) / 2);
      return { ...row, rateConstant: row.rateConstant * Math.exp(0.03 * residuals[i] / s) };
    }),
  );
  const factor = (celsius: number) => {
    const k = fit.rateConstantAt(`${celsius} °C`);
    return k.interval(0.95)[1] / k.value;
  };
  expect(factor(25)).toBeCloseTo(1.22, 2);
  expect(factor(5)).toBeCloseTo(1.41, 2);
});

describe("weights and scatter", () => {
  const exact = onLine(80_000, 1e11, [300, 310, 320, 330, 340]);

  test("stated errors that cover the scatter are trusted", () => {
    const fit = fitArrhenius(
      exact.map((row) => ({ ...row, standardError: 0.03 * row.rateConstant })),
    );
    expect(fit.degreesOfFreedom).toBe(Infinity);
    // u²(Ea) = R² u²/Σ(x − x̄)² by hand.
    const x = exact.map((row) => 1 / row.temperature);
    const mean = x.reduce((a, b) => a + b) / x.length;
    const sxx = x.reduce((sum, v) => sum + (v - mean) ** 2, 0);
    const expected = GAS_CONSTANT * 0.03 / Math.sqrt(sxx) / 1000;
    expect(correctDigits(fit.activationEnergy.standardError, expected)).toBeGreaterThan(8);
  });

  test("scatter beyond them widens the errors and says so", () => {
    const rows = exact.map(({ temperature, rateConstant }, i) => {
      const scattered = rateConstant * Math.exp(0.1 * (-1) ** i);
      return { temperature, rateConstant: scattered, standardError: 0.01 * scattered };
    });
    const fit = fitArrhenius(rows);
    const unweighted = fitArrhenius(rows.map(({ temperature, rateConstant }) => ({
      temperature,
      rateConstant,
    })));
    expect(fit.cautions.map((c) => c.code)).toContain("scatter-exceeds-uncertainty");
    expect(fit.degreesOfFreedom).toBe(3);
    // Equal relative errors, widened to the scatter: the same as judging by the scatter alone.
    expect(fit.activationEnergy.standardError / unweighted.activationEnergy.standardError)
      .toBeCloseTo(1, 8);
  });

  test("the interval of Ea covers the truth in 95 % of simulations with true stated errors", () => {
    const generator = prand.xoroshiro128plus(7);
    const uniform = () => prand.unsafeUniformIntDistribution(1, 2 ** 31, generator) / 2 ** 31;
    const normal = () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
    let covered = 0;
    const trials = 2000;
    for (let trial = 0; trial < trials; trial++) {
      const fit = fitArrhenius(exact.map((row) => {
        const rateConstant = row.rateConstant * Math.exp(0.03 * normal());
        return { ...row, rateConstant, standardError: 0.03 * rateConstant };
      }));
      const [low, high] = fit.activationEnergy.interval(0.95);
      if (low < 80 && 80 < high) covered++;
    }
    // Three binomial standard deviations are 0.015; widening after a failed test makes it a little wider.
    expect(covered / trials).toBeGreaterThan(0.935);
    expect(covered / trials).toBeLessThan(0.975);
  });
});

describe("gates", () => {
  test("a span below 10 K", () => {
    const fit = fitArrhenius(onLine(80_000, 1e11, [300, 303, 306, 309]));
    expect(fit.cautions[0]).toMatchObject({ code: "temperature-span", severity: "serious" });
    expect(fit.cautions[0].message).toContain("9.00 K");
  });

  test("extrapolation says how far, and is serious beyond the width of the range", () => {
    const fit = fitArrhenius(onLine(80_000, 1e11, [313.15, 323.15, 333.15]));
    const near = fit.rateConstantAt("25 °C");
    const far = fit.rateConstantAt("5 °C");
    expect(near.cautions[0]).toMatchObject({ code: "extrapolation", severity: "caution" });
    expect(near.cautions[0].message).toContain("15.0 K below the tested range 313.15 to 333.15 K");
    expect(far.cautions[0].severity).toBe("serious");
    expect(fit.rateConstantAt(320).cautions).toEqual([]);
    // deno-lint-ignore no-explicit-any
    const bundle = (near as any)[Symbol.for("Jupyter.display")]();
    expect(bundle["text/html"]).toContain("15.0 K below");
    expect(near.in("1/min").cautions).toEqual(near.cautions);
  });
});

test("prediction variance less confidence variance is the variance of a point", () => {
  const rows = onLine(80_000, 1e11, [300, 310, 320, 330]).map((row, i) => ({
    ...row,
    rateConstant: row.rateConstant * (1 + 0.02 * [1, -1, 1, -1][i]),
  }));
  const fit = fitArrhenius(rows);
  const t = 4.302652729911275; // Student, 95 %, 2 degrees of freedom (NIST/SEMATECH e-Handbook: 4.303)
  const s2 = fit.residuals.reduce((sum, r) => sum + r * r, 0) / 2;
  for (const T of [290, 315, 350]) {
    const band = fit.band(T);
    const variance = ([low, high]: readonly [number, number]) =>
      (Math.log(high / low) / (2 * t)) ** 2;
    expect(variance(band.prediction) - variance(band.confidence)).toBeCloseTo(s2, 10);
  }
});

describe("rows", () => {
  test("text with units, estimates and numbers are the same rows", () => {
    const minutes = fitArrhenius([
      { temperature: "25 °C", rateConstant: "0.006 1/min" },
      { temperature: "35 °C", rateConstant: "0.018 1/min" },
      { temperature: "45 °C", rateConstant: "0.048 1/min" },
    ]);
    const seconds = fitArrhenius([
      { temperature: 298.15, rateConstant: 1e-4 },
      { temperature: 308.15, rateConstant: 3e-4 },
      { temperature: 318.15, rateConstant: 8e-4 },
    ]);
    expect(correctDigits(minutes.activationEnergy.value, seconds.activationEnergy.value))
      .toBeGreaterThan(12);
    const estimates = fitArrhenius(
      [[298.15, 0.006], [308.15, 0.018], [318.15, 0.048]].map(([temperature, value]) => ({
        temperature,
        rateConstant: new Estimate({ value, standardError: 0.02 * value, unit: "1/min" }),
      })),
    );
    expect(estimates.rateConstantAtReference.unit).toBe("1/min");
  });

  test("errors name the row, its value and what to do", () => {
    const good = { temperature: 300, rateConstant: 1e-3 };
    expect(() => fitArrhenius([good, { temperature: 310, rateConstant: -1 }])).toThrow(
      /row 1.*-1 s⁻¹ must both be more than 0/,
    );
    expect(() => fitArrhenius([good, good])).toThrow(/1 temperature: give at least 3/);
    expect(() =>
      fitArrhenius([good, { ...good, temperature: 310, standardError: 1e-5 }, {
        ...good,
        temperature: 320,
      }])
    ).toThrow(/1 of 3 have a standard error/);
    expect(() => fitArrhenius([good, { temperature: "310 min", rateConstant: 1 }])).toThrow(
      /row 1.*measures time/,
    );
    // deno-lint-ignore no-explicit-any
    expect(() => fitArrhenius("data.csv" as any)).toThrow(/give rows/);
  });
});
