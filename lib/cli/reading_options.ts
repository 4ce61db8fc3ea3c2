import type { ReadRunsOptions } from "../run/read_runs.ts";
import { type CommandOption, type CommandValues, textOf, textsOf, UsageError } from "./command.ts";

/** Options that say how run files are written, for every command that reads them. */
export const READING_OPTIONS: Readonly<Record<string, CommandOption>> = {
  species: { type: "string", value: "NAME", help: "species or signal that is followed" },
  layout: { type: "string", value: "FORM", help: "long, wide or single; found out by itself" },
  separator: { type: "string", value: "CHARACTER", help: "between cells: , ; or tab" },
  decimal: { type: "string", value: "MARK", help: "decimal mark: . or ," },
  initial: {
    type: "string",
    value: "SPECIES=VALUE",
    multiple: true,
    help: `initial concentration in all runs, such as "A=10 mmol/L"; may be repeated`,
  },
  temperature: { type: "string", value: "VALUE", help: `temperature of all runs, such as "25 °C"` },
};

/** The reading options as `readRuns` takes them.
 *
 * @throws {UsageError} on a value that is not one of the choices */
export function readingOptions(values: CommandValues): ReadRunsOptions {
  const separator = textOf(values, "separator");
  return {
    layout: choice(values, "layout", ["long", "wide", "single"]),
    separator: separator === "tab" || separator === "\\t"
      ? "\t"
      : separator as "," | ";" | undefined,
    decimal: choice(values, "decimal", [".", ","]),
    temperature: textOf(values, "temperature"),
    initial: initialConcentrations(values),
  };
}

function initialConcentrations(values: CommandValues): Record<string, string> | undefined {
  const given = textsOf(values, "initial");
  if (given.length === 0) return undefined;
  return Object.fromEntries(given.map((text) => {
    const match = /^(.+?)=(.+)$/.exec(text);
    if (match) return [match[1].trim(), match[2].trim()];
    throw new UsageError(
      `Cannot use "${text}" as --initial: write a species and a value, "A=10 mmol/L"`,
    );
  }));
}

function choice<T extends string>(
  values: CommandValues,
  name: string,
  choices: readonly T[],
): T | undefined {
  const given = textOf(values, name);
  if (given === undefined || choices.includes(given as T)) return given as T | undefined;
  throw new UsageError(`Cannot use "${given}" as --${name}: write ${choices.join(" or ")}`);
}
