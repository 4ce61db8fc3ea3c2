import { BOLTZMANN_CONSTANT, GAS_CONSTANT, PLANCK_CONSTANT } from "../quantity/constants.ts";
import { type Quantity, readQuantity } from "../quantity/read_quantity.ts";

/** Arrhenius equation, k = A·(T/T_ref)ⁿ·exp(−Ea/RT); n = 0 where left out.
 *
 * Source: IUPAC Gold Book, A00446 (Arrhenius equation) and M03963 (modified Arrhenius equation). */
export interface ArrheniusExpression {
  /** A, in the unit of the rate constant (mol/L and s). */
  readonly preExponentialFactor: number;
  /** Ea: kJ/mol, or text with its unit. */
  readonly activationEnergy: Quantity;
  /** n.
   * @default {0} */
  readonly temperatureExponent?: number;
  /** T_ref: K, or text with its unit; 1 K gives k = A·Tⁿ·exp(−Ea/RT) with T in K.
   * @default {1} */
  readonly referenceTemperature?: Quantity;
}

/** Eyring equation, k = κ·(k_B T/h)·exp(ΔS‡/R)·exp(−ΔH‡/RT), standard state 1 mol/L.
 *
 * Source: H. Eyring, J. Chem. Phys. 3 (1935) 107; IUPAC Gold Book, T06470. */
export interface EyringExpression {
  /** ΔH‡: kJ/mol, or text with its unit. */
  readonly activationEnthalpy: Quantity;
  /** ΔS‡, J/(mol K), or text with its unit; standard state 1 mol/L. */
  readonly activationEntropy: Quantity;
  /** κ.
   * @default {1} */
  readonly transmissionCoefficient?: number;
}

/** How a fall-off curve is broadened: not at all, or by Troe's factor F with log F =
 * log F_c/[1 + (log p_r/N)²], where N is 1 or 0.75 − 1.27 log F_c. The two forms differ by about 1 % in k.
 *
 * Source: F. A. Lindemann, Trans. Faraday Soc. 17 (1922) 598; J. Troe, J. Phys. Chem. 83 (1979) 114;
 * R. G. Gilbert, K. Luther & J. Troe, Ber. Bunsenges. Phys. Chem. 87 (1983) 169. */
export type Broadening =
  | { readonly form: "Lindemann" }
  | { readonly form: "Troe, N = 1"; readonly centre: number }
  | { readonly form: "Troe, N = 0.75 - 1.27 log Fc"; readonly centre: number };

/** A rate constant between its limits of low and high pressure, k = k∞·p_r/(1 + p_r)·F, p_r = k₀[M]/k∞. */
export interface FallOffExpression {
  /** k₀, one order higher than k∞. */
  readonly lowPressure: number | ArrheniusExpression;
  /** k∞. */
  readonly highPressure: number | ArrheniusExpression;
  /** Broadening of the curve.
   * @default {Lindemann} */
  readonly broadening?: Broadening;
}

/** A reverse rate constant k₋ = k₊/K from the forward one and the equilibrium constant of concentrations. */
export interface ReverseExpression {
  /** Symbol of the forward rate constant. */
  readonly forward: string;
  /** K at all temperatures, or as K = exp(−ΔH°/RT + ΔS°/R). */
  readonly equilibriumConstant:
    | number
    | { readonly reactionEnthalpy: Quantity; readonly reactionEntropy: Quantity };
}

/** How a rate constant is given: its value, or as a function of temperature and [M]. */
export type RateExpression =
  | number
  | ArrheniusExpression
  | EyringExpression
  | FallOffExpression
  | ReverseExpression;

/** A rate constant as a function of temperature, K, and [M], mol/L. */
export type RateFunction = (temperature: number, thirdBody: number | undefined) => number;

/** Makes a function of temperature and [M] from the way a rate constant is given; units are read once.
 *
 * @param expression how it is given
 * @param others functions of other symbols, for reverse constants
 * @throws {RangeError} if a forward symbol does not exist or a value is out of range
 * @throws {TypeError} on an object that is none of the known forms */
export function rateFunctionOf(
  expression: RateExpression,
  others: (symbol: string) => RateFunction = noOthers,
): RateFunction {
  if (typeof expression === "number") return () => expression;
  if ("activationEnergy" in expression) return arrhenius(expression);
  if ("activationEnthalpy" in expression) return eyring(expression);
  if ("lowPressure" in expression) return fallOff(expression);
  if ("forward" in expression) {
    const forward = others(expression.forward);
    const constant = equilibriumConstant(expression);
    return (temperature, thirdBody) => forward(temperature, thirdBody) / constant(temperature);
  }
  throw new TypeError(
    `Cannot read a rate constant from ${JSON.stringify(expression)}: write a number, or ` +
      `{ preExponentialFactor, activationEnergy }, { activationEnthalpy, activationEntropy }, ` +
      `{ lowPressure, highPressure, broadening } or { forward, equilibriumConstant }`,
  );
}

/** Whether a rate constant depends on temperature of itself; a reverse one also by its forward one. */
export function dependsOnTemperature(expression: RateExpression): boolean {
  if (typeof expression === "number") return false;
  if ("lowPressure" in expression) {
    return dependsOnTemperature(expression.lowPressure) ||
      dependsOnTemperature(expression.highPressure);
  }
  if ("forward" in expression) return typeof expression.equilibriumConstant !== "number";
  return true;
}

function noOthers(symbol: string): never {
  throw new RangeError(
    `Cannot evaluate a reverse rate constant: the forward one, "${symbol}", is not among the rate constants`,
  );
}

function arrhenius(expression: ArrheniusExpression): RateFunction {
  const energy = readQuantity(expression.activationEnergy, "kJ/mol", "an activation energy") * 1000;
  const n = expression.temperatureExponent ?? 0;
  const reference = readQuantity(
    expression.referenceTemperature ?? 1,
    "K",
    "a reference temperature",
  );
  const slope = energy / GAS_CONSTANT;
  return (temperature) =>
    expression.preExponentialFactor * (n === 0 ? 1 : (temperature / reference) ** n) *
    Math.exp(-slope / temperature);
}

function eyring(expression: EyringExpression): RateFunction {
  const enthalpy = readQuantity(expression.activationEnthalpy, "kJ/mol", "an activation enthalpy") *
    1000;
  const entropy = readQuantity(expression.activationEntropy, "J/(mol K)", "an activation entropy");
  const factor = (expression.transmissionCoefficient ?? 1) * BOLTZMANN_CONSTANT / PLANCK_CONSTANT *
    Math.exp(entropy / GAS_CONSTANT);
  return (temperature) => factor * temperature * Math.exp(-enthalpy / (GAS_CONSTANT * temperature));
}

function fallOff(expression: FallOffExpression): RateFunction {
  const low = rateFunctionOf(expression.lowPressure);
  const high = rateFunctionOf(expression.highPressure);
  const broaden = broadening(expression.broadening);
  return (temperature, thirdBody) => {
    if (thirdBody === undefined) {
      throw new RangeError(
        `Cannot evaluate a fall-off rate constant: the concentration of M is not given; add M to the ` +
          `initial concentrations`,
      );
    }
    const limit = high(temperature, thirdBody);
    const reduced = low(temperature, thirdBody) * thirdBody / limit;
    return reduced === 0 ? 0 : limit * reduced / (1 + reduced) * broaden(reduced);
  };
}

/** F as a function of reduced pressure. */
function broadening(given: Broadening | undefined): (reduced: number) => number {
  if (given === undefined || given.form === "Lindemann") return () => 1;
  const { centre, form } = given;
  if (!(centre > 0 && centre <= 1)) {
    throw new RangeError(
      `Cannot broaden a fall-off curve with the centre ${centre}: it lies above 0 and at most at 1`,
    );
  }
  const width = form === "Troe, N = 1" ? 1 : 0.75 - 1.27 * Math.log10(centre);
  return (reduced) => centre ** (1 / (1 + (Math.log10(reduced) / width) ** 2));
}

function equilibriumConstant(expression: ReverseExpression): (temperature: number) => number {
  const given = expression.equilibriumConstant;
  if (typeof given === "number") {
    if (given > 0) return () => given;
    throw new RangeError(
      `Cannot divide by the equilibrium constant ${given}: it must be more than 0`,
    );
  }
  const entropy = readQuantity(given.reactionEntropy, "J/(mol K)", "a reaction entropy");
  const enthalpy = readQuantity(given.reactionEnthalpy, "kJ/mol", "a reaction enthalpy") * 1000;
  return (temperature) =>
    Math.exp(entropy / GAS_CONSTANT - enthalpy / (GAS_CONSTANT * temperature));
}
