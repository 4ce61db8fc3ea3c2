import { parseArgs } from "node:util";
import { type Command, type CommandValues, UsageError } from "./command.ts";
import { COMMANDS } from "./commands.ts";
import { commandHelp, overview } from "./help.ts";

/** What was asked for on the command line: a page of help, or a command to run. */
export type Request =
  | { readonly help: string; readonly exitCode: 0 | 2 }
  | { readonly command: Command; readonly operands: string[]; readonly values: CommandValues };

/** Reads the command line.
 *
 * @param args what stands behind `ratebook`
 * @throws {UsageError} on a command or an option that does not exist */
export function parseCommand(args: readonly string[]): Request {
  const [name, ...rest] = args;
  if (name === undefined) return { help: overview(COMMANDS), exitCode: 2 };
  if (name === "--help" || name === "-h") return { help: overview(COMMANDS), exitCode: 0 };
  const command = COMMANDS.find((candidate) => candidate.name === name);
  if (!command) {
    throw new UsageError(
      `Cannot run "${name}": there are ${COMMANDS.map((known) => known.name).join(", ")}`,
    );
  }
  if (rest.includes("--help") || rest.includes("-h")) {
    return { help: commandHelp(command), exitCode: 0 };
  }
  try {
    const { values, positionals } = parseArgs({
      args: rest,
      options: { ...command.options, json: { type: "boolean" } },
      allowPositionals: true,
    });
    return { command, operands: positionals, values };
  } catch (error) {
    throw new UsageError(
      `Cannot run ${name}: ${error instanceof Error ? error.message : error}; ` +
        `deno task ratebook ${name} --help lists its options`,
    );
  }
}
