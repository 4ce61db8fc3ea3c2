import { dirname, resolve } from "node:path";
import { fileURLToPath } from "node:url";
import * as option from "../quantity/options.ts";
import { CellOutputs } from "./cell_outputs.ts";
import type { JupyterMessage } from "./jupyter_message.ts";
import { Kernel, KernelError } from "./kernel.ts";
import {
  joinText,
  type Notebook,
  type NotebookCell,
  type Output,
  parseNotebook,
} from "./notebook.ts";

/** Follows the work of {@link runNotebook}. */
export interface NotebookProgress {
  /** A code cell starts; counted from 0 among the code cells. */
  cellStarted(index: number, total: number, source: string): void;
  /** All cells are done, or the run has stopped. */
  finished(): void;
}

/** How {@link runNotebook} runs. */
export interface RunNotebookOptions {
  /** Longest time for one cell, s.
   * @default {600} */
  cellTimeout?: number;
  /** Stops the run; the kernel is ended. */
  signal?: AbortSignal;
  /** Told of each cell. */
  progress?: NotebookProgress;
}

/** A cell that threw, ran too long, or asked for input. */
export class NotebookCellError extends Error {
  /** Which cell of the notebook, from 1, all kinds counted. */
  readonly cell: number;
  /** Its source. */
  readonly source: string;
  /** The notebook with the outputs up to and with this cell. */
  readonly partial: Notebook;

  /** The error of one cell.
   *
   * @param cell which cell, from 1 @param source its source @param why what happened
   * @param partial outputs so far */
  constructor(cell: number, source: string, why: string, partial: Notebook) {
    super(`Cell ${cell} stopped the notebook: ${why}\n${quote(source)}`);
    this.name = "NotebookCellError";
    this.cell = cell;
    this.source = source;
    this.partial = partial;
  }
}

const CELL_TIMEOUT = 600;

/** Code that marks the end of a cell's outputs. The Deno kernel (2.9.6) replies and goes idle while outputs
 * still wait in one queue, first in, first out, and it gives those that are left the parent of the request
 * running then. So a request is sent whose only output is this mark: all that comes before it belongs to
 * the cell, whichever parent it has. No waiting for silence is needed, and none could be enough. */
const MARK = "application/vnd.ratebook.end-of-cell";
const MARK_CODE = `await Deno.jupyter.broadcast("display_data", ` +
  `{ data: { "${MARK}": "" }, metadata: {}, transient: {} });`;

/** Runs a notebook from top to bottom on a new Deno kernel and gives back a copy with all outputs. Nothing
 * is written. The kernel runs in the notebook's folder and is ended before this returns or throws.
 *
 * @param path path or file: URL of the notebook
 * @param options time limit, abort, progress
 * @returns the executed notebook
 * @throws {NotebookCellError} if a cell throws or runs too long
 * @throws {KernelError} if the kernel does not start, or ends by itself
 * @throws {SyntaxError} if the file is no notebook */
export async function runNotebook(
  path: string | URL,
  options: RunNotebookOptions = {},
): Promise<Notebook> {
  const read = option.readOptions("runNotebook", options, {
    cellTimeout: option.number({ min: 0.01 }),
    signal: option.instance(AbortSignal),
    progress: (value: unknown): NotebookProgress => value as NotebookProgress,
  });
  const { cellTimeout = CELL_TIMEOUT, signal, progress } = read;
  const file = path instanceof URL ? fileURLToPath(path) : resolve(path);
  const notebook = parseNotebook(await Deno.readTextFile(file), file.split(/[/\\]/).at(-1)!);
  signal?.throwIfAborted();
  const kernel = await Kernel.start(dirname(file));
  const total = notebook.cells.filter((cell) => cell.cell_type === "code").length;
  const cells: NotebookCell[] = notebook.cells.map((cell) =>
    cell.cell_type === "code" ? { ...cell, execution_count: null, outputs: [] } : cell
  );
  const displays = new Map<string, Output[]>();
  let done = 0;
  try {
    for (const [i, cell] of cells.entries()) {
      if (cell.cell_type !== "code") continue;
      const source = joinText(cell.source);
      progress?.cellStarted(done, total, source);
      const outputs = new CellOutputs(displays);
      const end = await runCell(kernel, source, outputs, cellTimeout, signal);
      cells[i] = { ...cell, execution_count: ++done, outputs: outputs.outputs };
      if (end !== undefined) {
        throw new NotebookCellError(i + 1, source, end, { ...notebook, cells });
      }
    }
    return { ...notebook, cells, metadata: { ...notebook.metadata } };
  } finally {
    await kernel.shutdown();
    progress?.finished();
  }
}

/** Runs a cell; gives back why it stopped the notebook, or `undefined`. */
async function runCell(
  kernel: Kernel,
  source: string,
  outputs: CellOutputs,
  timeout: number,
  signal: AbortSignal | undefined,
): Promise<string | undefined> {
  let finish: () => void;
  const complete = new Promise<void>((done) => finish = done);
  let failed: string | undefined;
  kernel.listen((message: JupyterMessage) => {
    if (message.header.msg_type === "display_data" && MARK in message.content.data) return finish();
    if (message.header.msg_type === "error") {
      failed = `${message.content.ename}: ${message.content.evalue}`;
    }
    outputs.take(message);
  });
  const limit = deadline(timeout, signal);
  try {
    const work = (async () => {
      const { reply } = await kernel.execute(source, { storeHistory: true });
      const answer = await reply;
      if (answer) await (await kernel.execute(MARK_CODE, { storeHistory: false })).reply;
      if (answer?.content.status === "error") {
        failed ??= `${answer.content.ename}: ${answer.content.evalue}`;
      }
      await complete;
    })();
    const first = await Promise.race([
      work.then(() => "done" as const),
      kernel.ended.then(() => "ended" as const),
      limit.reached,
    ]);
    if (first === "timeout") {
      return `it ran longer than ${timeout} s; raise the time limit or split it`;
    }
    if (first === "aborted") signal!.throwIfAborted();
    if (first === "ended") {
      throw new KernelError(
        `Cannot go on: the Deno kernel ended by itself while it ran\n${
          quote(source)
        }\n${kernel.standardError}`,
      );
    }
    return failed;
  } finally {
    limit.clear();
  }
}

function deadline(
  seconds: number,
  signal: AbortSignal | undefined,
): { reached: Promise<"timeout" | "aborted">; clear: () => void } {
  const { promise, resolve } = Promise.withResolvers<"timeout" | "aborted">();
  const timer = setTimeout(() => resolve("timeout"), Math.min(seconds * 1000, 2 ** 31 - 1));
  const abort = () => resolve("aborted");
  signal?.addEventListener("abort", abort, { once: true });
  return {
    reached: promise,
    clear: () => {
      clearTimeout(timer);
      signal?.removeEventListener("abort", abort);
    },
  };
}

/** The first lines of a cell, marked as quoted. */
function quote(source: string): string {
  const lines = source.split("\n");
  return [...lines.slice(0, 12), ...(lines.length > 12 ? ["…"] : [])]
    .map((line) => `  | ${line}`).join("\n");
}
