import { basename, join, resolve } from "node:path";
import { collectEvidence, type Evidence } from "./evidence.ts";
import { KernelError } from "./kernel.ts";
import { formatNotebook } from "./notebook.ts";
import { NotebookCellError } from "./notebook_cell_error.ts";
import { renderReport } from "./render_report.ts";
import { runNotebook, type RunNotebookOptions } from "./run_notebook.ts";
import { runtimeVersions } from "./versions.ts";

/** How {@link writeReport} works. */
export interface WriteReportOptions extends RunNotebookOptions {
  /** Folder of the report; made if it is not there.
   * @default {"out"} */
  folder?: string;
  /** Who answers for the report. */
  author?: string;
}

/** What was written. */
export interface WrittenReport {
  /** Path of the executed notebook. */
  readonly notebook: string;
  /** Path of the HTML page. */
  readonly html: string;
  /** What the results told. */
  readonly evidence: Evidence;
}

/** Runs a notebook and writes it, executed, and its report under a folder.
 *
 * Both files are written under other names first and renamed when both are complete: a cell that throws
 * leaves nothing under the report's name, and an earlier report stays as it was, which the error says.
 *
 * @param path the notebook @param options folder, author, and those of `runNotebook`
 * @throws {NotebookCellError} if a cell throws @throws {KernelError} if the kernel fails
 * @throws {RangeError} if the folder is the notebook's own */
export async function writeReport(
  path: string,
  options: WriteReportOptions = {},
): Promise<WrittenReport> {
  const { folder = "out", author, ...run } = options;
  const name = basename(path).replace(/\.ipynb$/, "");
  const html = resolve(join(folder, `${name}.html`));
  const copy = resolve(join(folder, `${name}.ipynb`));
  if (copy === resolve(path)) {
    throw new RangeError(
      `Cannot write the report under ${folder}: the executed notebook would replace ${path} itself; ` +
        `name another folder`,
    );
  }
  const executed = await runNotebook(path, run).catch((error) => tellOfEarlier(error, html));
  const page = await renderReport(executed, {
    ...(author === undefined ? {} : { author }),
    notebookName: basename(path),
    versions: await runtimeVersions(),
  });
  await Deno.mkdir(folder, { recursive: true });
  const files = [
    { path: copy, text: formatNotebook(executed) },
    { path: html, text: page },
  ];
  const partial = files.map(({ path }) => `${path}.${crypto.randomUUID()}.partial`);
  try {
    for (const [i, file] of files.entries()) await Deno.writeTextFile(partial[i], file.text);
    for (const [i, file] of files.entries()) await Deno.rename(partial[i], file.path);
  } finally {
    for (const leftover of partial) await Deno.remove(leftover).catch(() => {});
  }
  return { notebook: copy, html, evidence: collectEvidence(executed) };
}

/** Adds to an error that an earlier report is still there, so that nobody takes it for the new one. */
async function tellOfEarlier(error: unknown, html: string): Promise<never> {
  const there = await Deno.stat(html).then((file) => file.isFile, () => false);
  if (there && (error instanceof NotebookCellError || error instanceof KernelError)) {
    error.message += `\nThe report ${html} is of an earlier run and was left as it was`;
  }
  throw error;
}
