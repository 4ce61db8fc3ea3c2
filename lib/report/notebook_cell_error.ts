import type { Notebook } from "./notebook.ts";

/** Why a cell stopped its notebook. */
export interface CellFault {
  /** In words, for the message. */
  readonly why: string;
  /** Class of what was thrown, as the kernel names it, if something was thrown. */
  readonly ename?: string;
  /** Its message. */
  readonly evalue?: string;
  /** Its stack, a line an entry. */
  readonly traceback?: readonly string[];
}

/** A cell that threw, ran too long, or asked for input. */
export class NotebookCellError extends Error {
  /** Which cell of the notebook, from 1, all kinds counted. */
  readonly cell: number;
  /** Its source. */
  readonly source: string;
  /** Class of what was thrown, as the kernel names it; left out where nothing was thrown. */
  readonly ename?: string;
  /** Message of what was thrown. */
  readonly evalue?: string;
  /** Stack of what was thrown, a line an entry. */
  readonly traceback: readonly string[];
  /** The notebook with the outputs up to and with this cell. */
  readonly partial: Notebook;

  /** The error of one cell.
   *
   * @param cell which cell, from 1 @param source its source @param fault what happened
   * @param partial outputs so far */
  constructor(cell: number, source: string, fault: CellFault, partial: Notebook) {
    super(`Cell ${cell} stopped the notebook: ${fault.why}\n${quote(source)}`);
    this.name = "NotebookCellError";
    this.cell = cell;
    this.source = source;
    if (fault.ename !== undefined) this.ename = fault.ename;
    if (fault.evalue !== undefined) this.evalue = fault.evalue;
    this.traceback = fault.traceback ?? [];
    this.partial = partial;
  }
}

/** The first lines of a cell, marked as quoted. */
export function quote(source: string): string {
  const lines = source.split("\n");
  return [...lines.slice(0, 12), ...(lines.length > 12 ? ["…"] : [])]
    .map((line) => `  | ${line}`).join("\n");
}
