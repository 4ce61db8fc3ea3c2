import { fileURLToPath } from "node:url";
import type { ParseArgsOptionDescriptor } from "node:util";

/** An option of a command: how it is parsed, and what it is for. */
export interface CommandOption extends ParseArgsOptionDescriptor {
  /** What the value is, for the help: `--at TEMPERATURE`. */
  readonly value?: string;
  /** What it is for, in a sentence. */
  readonly help: string;
}

/** What a command prints. */
export interface CommandOutput {
  /** Text for people, standard output. */
  readonly text: string;
  /** Data for scripts, printed instead with `--json`. */
  readonly data: unknown;
}

/** Parsed options of a command. */
export type CommandValues = Readonly<
  Record<string, string | boolean | (string | boolean)[] | undefined>
>;

/** A command of the command line. */
export interface Command {
  /** Its name. */
  readonly name: string;
  /** What it does, in a sentence. */
  readonly summary: string;
  /** What stands behind the name: `FILE …`. */
  readonly operands: string;
  /** Its options. */
  readonly options: Readonly<Record<string, CommandOption>>;
  /** What it may do, as flags of `deno run`; it runs in a process with nothing else. */
  readonly permissions: (operands: readonly string[], values: CommandValues) => readonly string[];
  /** Does the work.
   *
   * @throws {UsageError} on operands that do not fit */
  readonly run: (operands: readonly string[], values: CommandValues) => Promise<CommandOutput>;
}

/** A command that was called in a way it does not understand. */
export class UsageError extends SyntaxError {
  /** @param message what is wrong and what to write */
  constructor(message: string) {
    super(message);
    this.name = "UsageError";
  }
}

/** The flag that lets a process read these files. */
export function allowRead(paths: readonly string[]): string {
  return `--allow-read=${paths.map((path) => path.replaceAll(",", ",,")).join(",")}`;
}

/** The flag that lets a process write these files. */
export function allowWrite(paths: readonly string[]): string {
  return allowRead(paths).replace("--allow-read", "--allow-write");
}

/** Folder of the library, from which a figure's drawing is loaded when it is asked for. */
export const LIBRARY: string = fileURLToPath(new URL("../", import.meta.url));

/** A value of an option that was given once, as text. */
export function textOf(values: CommandValues, name: string): string | undefined {
  const value = values[name];
  return typeof value === "string" ? value : undefined;
}

/** All values of an option that may be given several times. */
export function textsOf(values: CommandValues, name: string): string[] {
  const value = values[name];
  return Array.isArray(value) ? value.filter((item) => typeof item === "string") : [];
}

/** The order given on the command line.
 *
 * @throws {UsageError} if it is neither a number nor "free" */
export function orderOf(values: CommandValues): number | "free" | undefined {
  const given = textOf(values, "order");
  if (given === undefined || given === "free") return given;
  const order = Number(given);
  if (given.trim() !== "" && Number.isFinite(order)) return order;
  throw new UsageError(`Cannot use "${given}" as --order: write a number such as 1, or free`);
}
