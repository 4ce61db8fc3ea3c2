import { dirname, resolve } from "node:path";
import { fileURLToPath } from "node:url";
import * as option from "../quantity/options.ts";
import { CellOutputs } from "./cell_outputs.ts";
import { Kernel } from "./kernel.ts";
import {
  joinText,
  type Notebook,
  type NotebookCell,
  type Output,
  parseNotebook,
} from "./notebook.ts";
import { NotebookCellError } from "./notebook_cell_error.ts";
import { runCell } from "./run_cell.ts";

export { NotebookCellError } from "./notebook_cell_error.ts";

/** Follows the work of {@link runNotebook}. */
export interface NotebookProgress {
  /** A code cell starts; counted from 0 among the code cells. */
  cellStarted(index: number, total: number, source: string): void;
  /** Its outputs are complete; not told of the cell that stops the notebook. */
  cellDone?(index: number, total: number): void;
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

const CELL_TIMEOUT = 600;

/** Runs a notebook from top to bottom on a new Deno kernel and gives back a copy with all outputs. Nothing
 * is written. The kernel runs in the notebook's folder and is ended before this returns or throws. What a cell
 * prints in the background after its end stands under the cell that runs then, and is lost after the last one:
 * await such work.
 *
 * @param path path or file: URL of the notebook
 * @param options time limit, abort, progress
 * @returns the executed notebook
 * @throws {NotebookCellError} if a cell throws, runs too long, or asks for input
 * @throws {KernelError} if the kernel does not start, or ends by itself
 * @throws {SyntaxError} if the file is no notebook
 *
 * @example
 * ```ts
 * import { ok } from "node:assert";
 * import { runNotebook } from "ratebook";
 *
 * const executed = await runNotebook("notebooks/rate_law_and_activation_energy.ipynb");
 * ok(executed.cells.every((cell) => cell.cell_type !== "code" || cell.execution_count !== null));
 * ``` */
export async function runNotebook(
  path: string | URL,
  options: RunNotebookOptions = {},
): Promise<Notebook> {
  const read = option.readOptions("runNotebook", options, {
    cellTimeout: option.number({ min: 0.01 }),
    signal: option.instance(AbortSignal),
    progress: progressOption,
  });
  const { cellTimeout = CELL_TIMEOUT, signal, progress } = read;
  const file = path instanceof URL ? fileURLToPath(path) : resolve(path);
  const notebook = parseNotebook(await Deno.readTextFile(file), file.split(/[/\\]/).at(-1)!);
  signal?.throwIfAborted();
  const kernel = await Kernel.start(dirname(file), signal);
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
      const fault = await runCell(kernel, source, outputs, { timeout: cellTimeout, signal });
      cells[i] = { ...cell, execution_count: done + 1, outputs: outputs.outputs };
      if (fault !== undefined) {
        throw new NotebookCellError(i + 1, source, fault, { ...notebook, cells });
      }
      progress?.cellDone?.(done, total);
      done++;
    }
    return { ...notebook, cells, metadata: { ...notebook.metadata } };
  } finally {
    await kernel.shutdown();
    progress?.finished();
  }
}

function progressOption(value: unknown, name: string): NotebookProgress {
  const progress = value as NotebookProgress;
  option.callable(progress?.cellStarted, `cellStarted of ${name}`);
  option.callable(progress?.finished, `finished of ${name}`);
  return progress;
}
