import type { Command } from "./command.ts";

/** The page that lists all commands. */
export function overview(commands: readonly Command[]): string {
  const widest = Math.max(...commands.map((c) => c.name.length + c.operands.length));
  return [
    "Ratebook: from runs of a reaction to its rate law, activation energy and a report.",
    "",
    "Usage: deno task ratebook COMMAND [OPTIONS] …",
    "",
    ...commands.map((c) => `  ${`${c.name} ${c.operands}`.padEnd(widest + 3)}${c.summary}`),
    "",
    "deno task ratebook COMMAND --help tells more. Exit codes: 0 done, 1 the work failed, 2 bad input.",
  ].join("\n");
}

/** The page of one command. */
export function commandHelp(command: Command): string {
  const options = Object.entries(command.options).map(([name, option]) => {
    const short = option.short ? `-${option.short}, ` : "";
    const value = option.type === "string" ? ` ${option.value ?? "VALUE"}` : "";
    return [`${short}--${name}${value}`, option.help] as const;
  });
  const all = [...options, ["--json", "print data for scripts instead of tables"] as const];
  const widest = Math.max(...all.map(([left]) => left.length));
  return [
    `${command.summary}`,
    "",
    `Usage: deno task ratebook ${command.name} [OPTIONS] ${command.operands}`,
    "",
    ...all.map(([left, right]) => `  ${left.padEnd(widest + 2)}${right}`),
  ].join("\n");
}
