import Qty from "js-quantities";
import { AVOGADRO_CONSTANT, STANDARD_ATMOSPHERE, ZERO_CELSIUS } from "./constants.ts";
import { type BaseQuantity, type Dimension, DIMENSIONLESS } from "./dimension.ts";

/** What one unit symbol stands for: size and scale zero in SI base units, and its dimension. */
export interface UnitSymbol {
  readonly factor: number;
  readonly offset: number;
  readonly dimension: Dimension;
}

/** Spellings of the trade and the unit library's name for each; one line a kind of quantity.
 * Only these are read, so that `AU` is absorbance and not a distance in astronomy. */
const SPELLINGS: Readonly<Record<string, readonly string[]>> = {
  ns: ["ns"],
  us: ["µs", "μs", "us"],
  ms: ["ms"],
  s: ["s", "sec", "second", "seconds"],
  min: ["min", "minute", "minutes"],
  h: ["h", "hr", "hour", "hours"],
  d: ["d", "day", "days"],
  week: ["week", "weeks", "wk"],
  pmol: ["pmol"],
  nmol: ["nmol"],
  umol: ["µmol", "μmol", "umol"],
  mmol: ["mmol"],
  mol: ["mol"],
  kmol: ["kmol"],
  ul: ["µL", "μL", "uL", "µl", "μl", "ul"],
  ml: ["mL", "ml"],
  l: ["L", "l", "liter", "litre"],
  nM: ["nM"],
  uM: ["µM", "μM", "uM"],
  mM: ["mM"],
  M: ["M"],
  nm: ["nm"],
  mm: ["mm"],
  cm: ["cm"],
  dm: ["dm"],
  m: ["m"],
  ug: ["µg", "μg", "ug"],
  mg: ["mg"],
  g: ["g"],
  kg: ["kg"],
  Pa: ["Pa"],
  hPa: ["hPa"],
  kPa: ["kPa"],
  MPa: ["MPa"],
  mbar: ["mbar"],
  bar: ["bar"],
  atm: ["atm"],
  J: ["J"],
  kJ: ["kJ"],
  MJ: ["MJ"],
  cal: ["cal"],
  kcal: ["kcal"],
  tempK: ["K"],
};

const BASE_OF: Readonly<Record<string, BaseQuantity>> = {
  "<meter>": "length",
  "<kilogram>": "mass",
  "<second>": "time",
  "<kelvin>": "temperature",
  "<temp-K>": "temperature",
  "<mole>": "amount",
};

const TEMPERATURE: Dimension = { ...DIMENSIONLESS, temperature: 1 };
const NUMBER: Dimension = DIMENSIONLESS;

/** Units that the library lacks, rounds, or reads as something else. */
const OWN: Readonly<Record<string, UnitSymbol>> = {
  ...alike(["°C", "℃", "degC"], 1, TEMPERATURE, ZERO_CELSIUS),
  ...alike(["torr", "Torr"], STANDARD_ATMOSPHERE / 760, dimensionOf("Pa")),
  ...alike(["mTorr"], STANDARD_ATMOSPHERE / 760e3, dimensionOf("Pa")),
  ...alike(["molecule", "molecules"], 1 / AVOGADRO_CONSTANT, dimensionOf("mol")),
  ...alike(["1", "-", "AU", "a.u.", "absorbance"], 1, NUMBER),
  ...alike(["mAU"], 1e-3, NUMBER),
  ...alike(["%"], 1e-2, NUMBER),
  ...alike(["ppm"], 1e-6, NUMBER),
};

const symbols = new Map<string, UnitSymbol>(Object.entries(OWN));

/** The meaning of a unit symbol, or `undefined` if it is not known. */
export function unitSymbol(text: string): UnitSymbol | undefined {
  const known = symbols.get(text);
  if (known) return known;
  const name = Object.keys(SPELLINGS).find((key) => SPELLINGS[key].includes(text));
  if (name === undefined) return undefined;
  const symbol = fromLibrary(name);
  symbols.set(text, symbol);
  return symbol;
}

/** What to write instead of an unknown symbol, as the tail of a sentence. */
export function unitSymbolHint(text: string): string {
  const all = [...Object.values(SPELLINGS).flat(), ...Object.keys(OWN)];
  const alike = all.filter((known) => known.toLowerCase() === text.toLowerCase());
  if (alike.length > 0) return `: write ${alike.map((known) => `"${known}"`).join(" or ")}`;
  if (text === "C" || text === "F") return `: write "°C" or "K"`;
  const first = [...Object.values(SPELLINGS).map(([text]) => text), ...Object.keys(OWN)];
  return `; known are ${first.join(", ")}`;
}

function fromLibrary(name: string): UnitSymbol {
  const base = new Qty(1, name).toBase();
  // Every unit taken from the library is a short decimal number of SI units: 15 figures hold it.
  return { factor: Number(base.scalar.toPrecision(15)), offset: 0, dimension: dimensionOf(name) };
}

function dimensionOf(name: string): Dimension {
  const base = new Qty(1, name).toBase();
  const dimension: Record<BaseQuantity, number> = { ...DIMENSIONLESS };
  for (const part of base.numerator) if (part in BASE_OF) dimension[BASE_OF[part]] += 1;
  for (const part of base.denominator) if (part in BASE_OF) dimension[BASE_OF[part]] -= 1;
  return dimension;
}

function alike(
  spellings: readonly string[],
  factor: number,
  dimension: Dimension,
  offset = 0,
): Record<string, UnitSymbol> {
  return Object.fromEntries(spellings.map((text) => [text, { factor, offset, dimension }]));
}
