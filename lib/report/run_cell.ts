import type { CellOutputs } from "./cell_outputs.ts";
import { deadline } from "./deadline.ts";
import type { JupyterMessage } from "./jupyter_message.ts";
import { type Kernel, KernelError } from "./kernel.ts";
import { type CellFault, quote } from "./notebook_cell_error.ts";

/** Code that marks the end of a cell's outputs. The Deno kernel (2.9.6) replies and goes idle while outputs
 * still wait in one queue, first in, first out, and it gives those that are left the parent of the request
 * running then. So a request is sent whose only output is this mark: all that comes before it belongs to
 * the cell, whichever parent it has. No waiting for silence is needed, and none could be enough.
 *
 * Measured on two cores, 15 runs of cells with 60 displays, 200 lines, both, a value after a top-level await,
 * a throw: of 9660 outputs 8033 came after the cell's own idle, up to 114 ms late; 7406 of them had the
 * mark's request as parent; none came after the mark. */
const MARK = "application/vnd.ratebook.end-of-cell";
const MARK_CODE = `await Deno.jupyter.broadcast("display_data", ` +
  `{ data: { "${MARK}": "" }, metadata: {}, transient: {} });`;

/** How a cell is run. */
export interface RunCellOptions {
  /** Longest time, s. */
  readonly timeout: number;
  /** Stops the wait. */
  readonly signal?: AbortSignal;
}

/** Runs a cell and gathers its outputs to the last.
 *
 * @param kernel where @param source the code @param outputs gathers the outputs @param options time limit, abort
 * @returns why the cell stops the notebook, or `undefined`
 * @throws {KernelError} if the kernel fails @throws {DOMException} if the signal aborts */
export async function runCell(
  kernel: Kernel,
  source: string,
  outputs: CellOutputs,
  options: RunCellOptions,
): Promise<CellFault | undefined> {
  let fault: CellFault | undefined;
  const marked = Promise.withResolvers<void>();
  const asked = Promise.withResolvers<"asked">();
  kernel.listen((message) => {
    const { header: { msg_type }, content } = message;
    if (msg_type === "display_data" && content.data && MARK in content.data) {
      return marked.resolve();
    }
    if (msg_type === "input_request") {
      fault = { why: askedForInput(content.prompt) };
      return asked.resolve("asked");
    }
    if (msg_type === "error") fault ??= thrown(content);
    try {
      outputs.take(message);
    } catch (error) {
      fault ??= { why: (error as Error).message };
    }
  });
  const failed = kernel.failed.then((why) => ({ why }));
  const work = async (): Promise<"done" | { why: string }> => {
    const answer = await (await kernel.execute(source, { storeHistory: true })).reply;
    const mark = await (await kernel.execute(MARK_CODE, { storeHistory: false })).reply;
    if (!answer || !mark) return failed;
    if (mark.content.status === "ok") await marked.promise;
    fault ??= faultOf(answer) ?? faultOf(mark);
    return "done";
  };
  const limit = deadline(options.timeout, options.signal);
  try {
    const first = await Promise.race([
      failed,
      limit.reached,
      asked.promise,
      work(),
    ]);
    if (typeof first === "object") {
      const words = `Cannot go on: the Deno kernel failed: ${first.why}, while it ran`;
      throw new KernelError(`${words}\n${quote(source)}\n${kernel.standardError}`.trim());
    }
    if (first === "aborted") options.signal!.throwIfAborted();
    if (first !== "timeout") return fault;
    return { why: `it ran longer than ${options.timeout} s; raise the time limit or split it` };
  } finally {
    limit.clear();
  }
}

function askedForInput(prompt: unknown): string {
  return `it asks for input (${JSON.stringify(prompt)}), and nobody is there to answer; ` +
    `write the value into the cell`;
}

/** What a reply says went wrong. */
function faultOf(reply: JupyterMessage): CellFault | undefined {
  return reply.content.status === "error" ? thrown(reply.content) : undefined;
}

/** A thrown value. Where the code does not compile, the kernel (2.9.6) says "Execution failed" without a trace. */
function thrown(
  { ename, evalue, traceback }: { ename: string; evalue: string; traceback?: string[] },
): CellFault {
  const compiled = evalue !== "Execution failed" || (traceback ?? []).length > 0;
  const why = compiled
    ? `${ename}: ${evalue}`
    : `it does not compile (the kernel says only "${evalue}"): look for a syntax error`;
  return { why, ename, evalue, traceback: traceback ?? [] };
}
