/** One command, in a process with the permissions of that command; started by main.ts. */
import { failure } from "./failure.ts";
import { parseCommand } from "./parse_command.ts";

if (import.meta.main) {
  try {
    const request = parseCommand(Deno.args);
    if ("help" in request) throw new SyntaxError(request.help);
    const { command, operands, values } = request;
    const output = await command.run(operands, values);
    console.log(values.json ? JSON.stringify(output.data, null, 2) : output.text);
  } catch (error) {
    const { message, exitCode } = failure(error);
    console.error(message);
    Deno.exit(exitCode);
  }
}
