import { describe, expect, test } from "vitest";
import {
  type RateExpression,
  type RateFunction,
  rateFunctionOf,
} from "../../lib/simulation/rate_expression.ts";
import { correctDigits, reference } from "../reference/reference.ts";

/** A rate constant at a temperature and [M]. */
function rateConstantOf(
  expression: RateExpression,
  { temperature, thirdBody }: { temperature: number; thirdBody?: number },
  others?: (symbol: string) => RateFunction,
): number {
  return rateFunctionOf(expression, others)(temperature, thirdBody);
}

describe("Arrhenius", () => {
  test("A published modified Arrhenius expression: k(298 K) of OH + n-pentane", () => {
    // Int. J. Chem. Kinet. (1994), k = A·T²·exp(−B/T), recomputed; see test/reference/arrhenius.json.
    const { sets } = reference<{
      sets: {
        id: string;
        data: { expressions: { A: number; n: number; B: number }[]; T: number };
        recomputed: { k298: number[] };
      }[];
    }>("arrhenius.json");
    const set = sets.find((s) => s.id === "arr-12-modified-arrhenius-pentane")!;
    const [{ A, n, B }] = set.data.expressions;
    const k = rateConstantOf({
      preExponentialFactor: A,
      activationEnergy: B * 8.31446261815324 / 1000,
      temperatureExponent: n,
    }, { temperature: set.data.T });
    expect(correctDigits(k, set.recomputed.k298[0])).toBeGreaterThan(8);
  });

  test("energy in any unit, a reference temperature", () => {
    const kJ = rateConstantOf({ preExponentialFactor: 1e10, activationEnergy: 83.68 }, {
      temperature: 300,
    });
    const kcal = rateConstantOf(
      { preExponentialFactor: 1e10, activationEnergy: "20 kcal/mol" },
      { temperature: 300 },
    );
    expect(correctDigits(kJ, kcal)).toBeGreaterThan(12);
    const scaled = rateConstantOf({
      preExponentialFactor: 1e10,
      activationEnergy: 83.68,
      temperatureExponent: 2,
      referenceTemperature: "300 K",
    }, { temperature: 600 });
    const plain = rateConstantOf({ preExponentialFactor: 4e10, activationEnergy: 83.68 }, {
      temperature: 600,
    });
    expect(correctDigits(scaled, plain)).toBeGreaterThan(12);
  });
});

describe("Eyring", () => {
  test("k_B T/h at 298.15 K is 6.2124e12 /s", () => {
    // CODATA 2018 constants; the figure is also the field's usual one for 25 °C.
    const k = rateConstantOf({ activationEnthalpy: 0, activationEntropy: 0 }, {
      temperature: 298.15,
    });
    expect(k / 6.2124e12).toBeCloseTo(1, 4);
  });

  test("A = 1e13 /s at 298.15 K goes with ΔS‡ = −4.36 J/(mol K): A = e·(k_B T/h)·exp(ΔS‡/R)", () => {
    // IUPAC Gold Book, E02142 (entropy of activation), for a first-order reaction.
    const k = rateConstantOf(
      { activationEnthalpy: 0, activationEntropy: "-4.36 J/(mol K)" },
      { temperature: 298.15 },
    );
    expect(Math.E * k / 1e13).toBeCloseTo(1, 2);
  });
});

describe("fall-off", () => {
  const expression = (form: "Lindemann" | "Troe, N = 1" | "Troe, N = 0.75 - 1.27 log Fc") => ({
    lowPressure: 2,
    highPressure: 4,
    broadening: form === "Lindemann" ? { form } as const : { form, centre: 0.6 } as const,
  });
  const at = (form: Parameters<typeof expression>[0], reduced: number) =>
    rateConstantOf(expression(form), { temperature: 300, thirdBody: 2 * reduced }) / 4;

  test("k/k∞ at p_r = 1 is half, times F_c = 0.6 with either broadening", () => {
    expect(at("Lindemann", 1)).toBeCloseTo(0.5, 12);
    expect(at("Troe, N = 1", 1)).toBeCloseTo(0.3, 12);
    expect(at("Troe, N = 0.75 - 1.27 log Fc", 1)).toBeCloseTo(0.3, 12);
  });

  test("k/k∞ at p_r = 10: 0.7042 and 0.6986 by the two forms", () => {
    // By hand from the published forms (Troe 1979; Gilbert, Luther & Troe 1983), F_c = 0.6.
    expect(at("Troe, N = 1", 10)).toBeCloseTo(0.7042, 4);
    expect(at("Troe, N = 0.75 - 1.27 log Fc", 10)).toBeCloseTo(0.6986, 4);
  });

  test("has the right limits", () => {
    for (const form of ["Lindemann", "Troe, N = 1", "Troe, N = 0.75 - 1.27 log Fc"] as const) {
      expect(at(form, 1e20)).toBeCloseTo(1, 2);
      expect(at(form, 1e-20) / 1e-20).toBeCloseTo(1, 2);
      expect(at(form, 0)).toBe(0);
    }
  });

  test("needs [M]", () => {
    expect(() => rateConstantOf(expression("Lindemann"), { temperature: 300 })).toThrow(
      /concentration of M is not given/,
    );
  });
});

describe("reverse constants", () => {
  const symbols = (symbol: string) => rateFunctionOf(({ k1: 6 } as Record<string, number>)[symbol]);

  test("from an equilibrium constant", () => {
    const k = rateConstantOf(
      { forward: "k1", equilibriumConstant: 3 },
      { temperature: 300 },
      symbols,
    );
    expect(k).toBe(2);
  });

  test("from ΔH° and ΔS°: K = 1 where ΔH° = TΔS°", () => {
    const k = rateConstantOf(
      {
        forward: "k1",
        equilibriumConstant: { reactionEnthalpy: 30, reactionEntropy: "100 J/(mol K)" },
      },
      { temperature: 300 },
      symbols,
    );
    expect(k).toBeCloseTo(6, 10);
  });

  test("a constant of 0, and a forward symbol that is not there, are refused", () => {
    expect(() =>
      rateConstantOf({ forward: "k1", equilibriumConstant: 0 }, { temperature: 300 }, symbols)
    ).toThrow(/equilibrium constant 0/);
    expect(() => rateConstantOf({ forward: "kx", equilibriumConstant: 1 }, { temperature: 300 }))
      .toThrow(/"kx"/);
  });
});

test("what is no rate constant is refused with the forms that are", () => {
  // deno-lint-ignore no-explicit-any
  expect(() => rateConstantOf({ Ea: 3 } as any, { temperature: 300 })).toThrow(
    /preExponentialFactor, activationEnergy/,
  );
});
