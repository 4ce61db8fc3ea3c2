/** The dimension of a quantity: the exponent of each base quantity (SI Brochure, 9th ed., 2.3.3). */
export type Dimension = Readonly<Record<BaseQuantity, number>>;

/** Base quantities that occur in the trade's units. */
export type BaseQuantity = "length" | "mass" | "time" | "temperature" | "amount";

const BASES: readonly BaseQuantity[] = ["length", "mass", "time", "temperature", "amount"];

/** The dimension of a pure number. */
export const DIMENSIONLESS: Dimension = {
  length: 0,
  mass: 0,
  time: 0,
  temperature: 0,
  amount: 0,
};

/** Product of two dimensions, the second raised to a power: a · b^power. */
export function multiplyDimensions(a: Dimension, b: Dimension, power: number): Dimension {
  const product = { ...a };
  for (const base of BASES) product[base] = a[base] + power * b[base];
  return product;
}

/** Whether two dimensions are the same (fractional exponents to 1e-9). */
export function sameDimension(a: Dimension, b: Dimension): boolean {
  return BASES.every((base) => Math.abs(a[base] - b[base]) < 1e-9);
}

/** The name of a dimension in words: "time", "amount concentration", or its base quantities. */
export function describeDimension(dimension: Dimension): string {
  const known = KNOWN.find(([, exponents]) =>
    sameDimension(dimension, { ...DIMENSIONLESS, ...exponents })
  );
  if (known) return known[0];
  const parts = BASES.filter((base) => dimension[base] !== 0)
    .map((base) => dimension[base] === 1 ? base : `${base}^${dimension[base]}`);
  return parts.join(" · ");
}

const KNOWN: readonly (readonly [string, Partial<Dimension>])[] = [
  ["number", {}],
  ["time", { time: 1 }],
  ["temperature", { temperature: 1 }],
  ["amount of substance", { amount: 1 }],
  ["mass", { mass: 1 }],
  ["length", { length: 1 }],
  ["volume", { length: 3 }],
  ["amount concentration", { amount: 1, length: -3 }],
  ["mass concentration", { mass: 1, length: -3 }],
  ["pressure", { mass: 1, length: -1, time: -2 }],
  ["energy", { mass: 1, length: 2, time: -2 }],
  ["molar energy", { mass: 1, length: 2, time: -2, amount: -1 }],
  ["molar entropy", { mass: 1, length: 2, time: -2, amount: -1, temperature: -1 }],
  ["rate of reaction", { amount: 1, length: -3, time: -1 }],
  ["first-order rate constant", { time: -1 }],
  ["second-order rate constant", { amount: -1, length: 3, time: -1 }],
  ["third-order rate constant", { amount: -2, length: 6, time: -1 }],
];
