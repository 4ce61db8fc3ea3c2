import { superscript } from "../quantity/number_format.ts";

/** The equation that defines a rate constant, for people and for typesetting. */
export interface RateEquation {
  /** `−d[A]/dt = k[A]²`. */
  readonly text: string;
  /** The same in LaTeX. */
  readonly latex: string;
}

/** The rate equation −d[A]/dt = k[A]ⁿ by which an integrated rate law defines its k.
 *
 * IUPAC, Pure Appl. Chem. 68 (1996) 149: a rate constant goes with its equation.
 *
 * @param species what is followed
 * @param order n, or "n" for a fitted order */
export function rateEquation(species: string, order: number | "n"): RateEquation {
  const name = `[${species}]`;
  const latexName = `[\\text{${species.replaceAll(/[\\{}$%#&_^~]/g, " ")}}]`;
  const left = `−d${name}/dt`;
  const latexLeft = `-\\frac{\\mathrm{d}${latexName}}{\\mathrm{d}t}`;
  if (order === 0) return { text: `${left} = k`, latex: `${latexLeft} = k` };
  if (order === 1) return { text: `${left} = k${name}`, latex: `${latexLeft} = k\\,${latexName}` };
  const exponent = order === "n" ? "ⁿ" : superscript(order);
  return {
    text: `${left} = k${name}${exponent}`,
    latex: `${latexLeft} = k\\,${latexName}^{${order}}`,
  };
}
