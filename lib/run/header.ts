import { commensurable, parseUnit, UnitError } from "../quantity/unit.ts";

/** What a column holds, by its header. */
export type Column =
  | { readonly role: "time"; readonly unit: string }
  | { readonly role: "run" }
  | { readonly role: "species" }
  | { readonly role: "temperature"; readonly unit: string }
  | { readonly role: "initial"; readonly species: string; readonly unit: string }
  | { readonly role: "uncertainty"; readonly signal: string; readonly unit: string }
  | { readonly role: "signal"; readonly name: string; readonly unit: string }
  | { readonly role: "exclusion" }
  | { readonly role: "property"; readonly name: string };

/** A header taken apart. */
export interface Header {
  /** What stands before the unit. */
  readonly name: string;
  /** Unit, if one is written. */
  readonly unit?: string;
}

/** Takes a header apart: `time [min]`, `time (min)`, `time / min`, or a bare name. */
export function splitHeader(text: string): Header {
  const bracket = /^(.*?)\s*\[([^\]]*)\]$/.exec(text);
  if (bracket && bracket[1] !== "") return { name: bracket[1], unit: bracket[2].trim() };
  const round = /^(.*?[^\s/])\s*\(([^()]*(?:\([^()]*\)[^()]*)*)\)$/.exec(text);
  if (round && !/^u$/i.test(round[1]) && isUnit(round[2])) {
    return { name: round[1], unit: round[2] };
  }
  const solidus = /^(.*?\S)\s*\/\s*(\S.*)$/.exec(text);
  if (solidus && isUnit(solidus[2])) {
    return { name: solidus[1], unit: solidus[2].replace(/^\((.*)\)$/, "$1") };
  }
  return { name: text };
}

/** What a column holds.
 *
 * @throws {UnitError} if the header has a unit that is not known, or one that does not fit its name */
export function readHeader(text: string): Column {
  const { name, unit } = splitHeader(text);
  if (unit !== undefined) parseUnit(unit);
  // By IUPAC's symbols t is time and T temperature.
  if (/^time$/i.test(name) || name === "t") {
    return { role: "time", unit: needUnit(text, name, unit, "s", "min") };
  }
  if (/^(run|run id|experiment)$/i.test(name) && unit === undefined) return { role: "run" };
  if (/^species$/i.test(name) && unit === undefined) return { role: "species" };
  if (/^(left out|excluded)$/i.test(name) && unit === undefined) return { role: "exclusion" };
  if (/^(temperature|temp\.?)$/i.test(name) || name === "T") {
    return { role: "temperature", unit: needUnit(text, name, unit, "K", "°C") };
  }
  const initial = /^initial\s+(.+)$/i.exec(name) ?? /^\[(.+)\](?:0|₀)$/.exec(name);
  if (initial) {
    const species = initial[1].replace(/^\[(.+)\]$/, "$1");
    return { role: "initial", species, unit: needUnit(text, name, unit, "mol/L", "mmol/L") };
  }
  const uncertainty = /^u\((.+)\)$/i.exec(name);
  if (uncertainty) {
    if (unit === undefined) {
      throw new UnitError(`the unit is missing; write "${text} [mmol/L]"`, text);
    }
    return { role: "uncertainty", signal: uncertainty[1], unit };
  }
  return unit === undefined ? { role: "property", name } : { role: "signal", name, unit };
}

function needUnit(
  text: string,
  name: string,
  unit: string | undefined,
  canonical: string,
  example: string,
): string {
  if (unit === undefined) {
    throw new UnitError(
      `the unit is missing; write it behind the name, "${name} [${example}]"`,
      text,
    );
  }
  if (commensurable(parseUnit(unit), parseUnit(canonical))) return unit;
  throw new UnitError(
    `${unit} is no unit of ${name}; write one such as "${name} [${example}]"`,
    text,
  );
}

function isUnit(text: string): boolean {
  try {
    parseUnit(text.replace(/^\((.*)\)$/, "$1"));
    return true;
  } catch {
    return false;
  }
}
