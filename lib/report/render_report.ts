import * as option from "../quantity/options.ts";
import type { Notebook } from "./notebook.ts";
import type { RenderReportOptions } from "./report_page.ts";

/** The page itself, with the typesetter, Markdown and the HTML cleaner; no literal in the import, so that they
 * are not looked at before a report is asked for. */
const PAGE: string = "./report_page.ts";

/** Renders an executed notebook as one HTML page that runs nothing and loads nothing: front matter, main
 * results, every caution, the notebook with its code folded, hashes of the files read, versions, and all
 * results as data in a template element with the id `ratebook-results`.
 *
 * @param notebook an executed notebook
 * @param options title, author, date, versions
 * @returns the page
 * @throws {TypeError} on an option that does not exist, or an output that claims to be evidence and is not
 *
 * @example
 * ```ts
 * import { ok } from "node:assert";
 * import { renderReport } from "ratebook";
 *
 * const cell = { cell_type: "markdown", id: "a", metadata: {}, source: "# How fast?\n\n$v = k[A]$" } as const;
 * const page = await renderReport({ cells: [cell], metadata: {}, nbformat: 4, nbformat_minor: 5 });
 * ok(page.includes("<h1>How fast?</h1>") && page.includes("<math>") && !page.includes("<script"));
 * ``` */
export async function renderReport(
  notebook: Notebook,
  options: RenderReportOptions = {},
): Promise<string> {
  const read = option.readOptions("renderReport", options, {
    title: option.text,
    author: option.text,
    date: option.instance(Date),
    notebookName: option.text,
    versions: option.record(option.text),
  });
  const { reportPage }: typeof import("./report_page.ts") = await import(PAGE);
  return reportPage(notebook, read);
}
