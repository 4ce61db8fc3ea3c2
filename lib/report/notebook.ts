/** Notebooks in the nbformat 4.5 file format.
 *
 * Source: Jupyter nbformat documentation, "The Notebook file format", 4.5. */

/** Text that may be written as a list of lines. */
export type MultilineText = string | readonly string[];

/** Data of an output by media type. */
export type MimeBundle = Readonly<Record<string, unknown>>;

/** An output of a code cell. */
export type Output =
  | { output_type: "stream"; name: "stdout" | "stderr"; text: MultilineText }
  | { output_type: "display_data"; data: MimeBundle; metadata: Readonly<Record<string, unknown>> }
  | {
    output_type: "execute_result";
    execution_count: number | null;
    data: MimeBundle;
    metadata: Readonly<Record<string, unknown>>;
  }
  | { output_type: "error"; ename: string; evalue: string; traceback: readonly string[] };

/** A cell. */
export type NotebookCell =
  | {
    cell_type: "markdown" | "raw";
    id: string;
    metadata: Readonly<Record<string, unknown>>;
    source: MultilineText;
    attachments?: unknown;
  }
  | {
    cell_type: "code";
    id: string;
    metadata: Readonly<Record<string, unknown>>;
    source: MultilineText;
    execution_count: number | null;
    outputs: readonly Output[];
  };

/** A notebook. */
export interface Notebook {
  /** Its cells. */
  cells: readonly NotebookCell[];
  /** Metadata of the whole. */
  metadata: Readonly<Record<string, unknown>>;
  /** Major version of the format. */
  nbformat: 4;
  /** Minor version of the format. */
  nbformat_minor: number;
}

/** Text of a field that may be a list of lines. */
export function joinText(text: MultilineText): string {
  return typeof text === "string" ? text : text.join("");
}

/** Reads a notebook from its JSON text, giving ids to cells of older minor versions.
 *
 * @param text the file's text @param name its name, for the message
 * @throws {SyntaxError} if it is no notebook of version 4 */
export function parseNotebook(text: string, name: string): Notebook {
  let raw: Record<string, unknown>;
  try {
    raw = JSON.parse(text);
  } catch (error) {
    throw new SyntaxError(
      `Cannot read the notebook ${name}: it is not JSON (${(error as Error).message})`,
    );
  }
  if (raw?.nbformat !== 4 || !Array.isArray(raw.cells)) {
    throw new SyntaxError(
      `Cannot read the notebook ${name}: expected nbformat 4 with cells, got nbformat ${raw?.nbformat}; ` +
        `save it again in Jupyter`,
    );
  }
  const cells = raw.cells.map((cell, i) => readCell(cell, i, name));
  const ids = new Set(cells.map((cell) => cell.id));
  if (ids.size !== cells.length) {
    throw new SyntaxError(`Cannot read the notebook ${name}: two cells have the same id`);
  }
  return {
    cells,
    metadata: (raw.metadata ?? {}) as Record<string, unknown>,
    nbformat: 4,
    nbformat_minor: Math.max(5, Number(raw.nbformat_minor ?? 5)),
  };
}

function readCell(raw: unknown, index: number, name: string): NotebookCell {
  const cell = raw as Record<string, unknown>;
  const kind = cell?.cell_type;
  if (kind !== "code" && kind !== "markdown" && kind !== "raw") {
    throw new SyntaxError(
      `Cannot read the notebook ${name}: cell ${index + 1} has the type ${JSON.stringify(kind)}`,
    );
  }
  const id = cell.id === undefined ? `cell-${index + 1}` : cell.id;
  if (typeof id !== "string" || !/^[a-zA-Z0-9-_]{1,64}$/.test(id)) {
    throw new SyntaxError(
      `Cannot read the notebook ${name}: cell ${index + 1} has the id ${
        JSON.stringify(id)
      }; expected 1 to 64 ` +
        `letters, digits, - or _`,
    );
  }
  if (cell.source !== undefined && !isText(cell.source)) {
    throw new SyntaxError(
      `Cannot read the notebook ${name}: the source of cell ${
        index + 1
      } is neither text nor a list of lines`,
    );
  }
  const shared = {
    id,
    metadata: (cell.metadata ?? {}) as Record<string, unknown>,
    source: (cell.source ?? "") as MultilineText,
  };
  if (kind !== "code") {
    return {
      cell_type: kind,
      ...shared,
      ...(cell.attachments === undefined ? {} : { attachments: cell.attachments }),
    };
  }
  return {
    cell_type: "code",
    ...shared,
    execution_count: (cell.execution_count ?? null) as number | null,
    outputs: (cell.outputs ?? []) as Output[],
  };
}

function isText(value: unknown): boolean {
  return typeof value === "string" ||
    Array.isArray(value) && value.every((line) => typeof line === "string");
}

/** A notebook as the text of its file. */
export function formatNotebook(notebook: Notebook): string {
  return JSON.stringify(notebook, null, 1) + "\n";
}
