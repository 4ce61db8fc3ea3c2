import { basename, join, resolve } from "node:path";
import { collectEvidence, type Evidence } from "./evidence.ts";
import { formatNotebook } from "./notebook.ts";
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
 * leaves nothing under the report's name, and an earlier report stays as it was.
 *
 * @param path the notebook @param options folder, author, and those of `runNotebook`
 * @throws {NotebookCellError} if a cell throws @throws {KernelError} if the kernel fails */
export async function writeReport(
  path: string,
  options: WriteReportOptions = {},
): Promise<WrittenReport> {
  const { folder = "out", author, ...run } = options;
  const name = basename(path).replace(/\.ipynb$/, "");
  const executed = await runNotebook(path, run);
  const page = await renderReport(executed, {
    ...(author === undefined ? {} : { author }),
    notebookName: basename(path),
    versions: await runtimeVersions(),
  });
  await Deno.mkdir(folder, { recursive: true });
  const files = [
    { path: resolve(join(folder, `${name}.ipynb`)), text: formatNotebook(executed) },
    { path: resolve(join(folder, `${name}.html`)), text: page },
  ];
  const partial = files.map(({ path }) => `${path}.${crypto.randomUUID()}.partial`);
  try {
    for (const [i, file] of files.entries()) await Deno.writeTextFile(partial[i], file.text);
    for (const [i, file] of files.entries()) await Deno.rename(partial[i], file.path);
  } finally {
    for (const leftover of partial) await Deno.remove(leftover).catch(() => {});
  }
  return { notebook: files[0].path, html: files[1].path, evidence: collectEvidence(executed) };
}
