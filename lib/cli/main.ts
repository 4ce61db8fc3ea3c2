/** The command line: `deno task ratebook COMMAND …`.
 *
 * This process only reads the command line; the command itself runs in a process of its own that may do
 * what the command needs and nothing else: no network, no other files. */
import { failure } from "./failure.ts";
import { parseCommand } from "./parse_command.ts";

async function main(args: readonly string[]): Promise<number> {
  const request = parseCommand(args);
  if ("help" in request) {
    console.log(request.help);
    return request.exitCode;
  }
  const { command, operands, values } = request;
  const child = new Deno.Command(Deno.execPath(), {
    args: [
      "run",
      "--quiet",
      "--no-prompt",
      // Some packages look through the environment when they load: they find only what is passed below.
      "--allow-env",
      ...command.permissions(operands, values),
      new URL("./command_process.ts", import.meta.url).href,
      ...args,
    ],
    // `deno task` moves to the project's folder; file names are meant from where it was called.
    cwd: Deno.env.get("INIT_CWD") || undefined,
    clearEnv: true,
    env: passedOn(),
    stdin: "null",
    stdout: "inherit",
    stderr: "inherit",
  }).spawn();
  const stop = () => child.kill("SIGINT");
  Deno.addSignalListener("SIGINT", stop);
  const { code } = await child.status;
  Deno.removeSignalListener("SIGINT", stop);
  return code;
}

/** The environment of a command: where packages are cached, where temporary files go, how to print. */
function passedOn(): Record<string, string> {
  const names = [
    ...["PATH", "HOME", "USERPROFILE", "SYSTEMROOT", "LOCALAPPDATA", "XDG_CACHE_HOME"],
    ...["DENO_DIR", "DENO_NO_UPDATE_CHECK", "NPM_CONFIG_REGISTRY"],
    ...["TMPDIR", "TEMP", "TMP", "NO_COLOR", "TERM", "LANG"],
  ];
  return Object.fromEntries(
    names.flatMap((name) => {
      const value = Deno.env.get(name);
      return value === undefined ? [] : [[name, value]];
    }),
  );
}

if (import.meta.main) {
  try {
    Deno.exit(await main(Deno.args));
  } catch (error) {
    const { message, exitCode } = failure(error);
    console.error(message);
    Deno.exit(exitCode);
  }
}
