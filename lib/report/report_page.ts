import type { Caution, Severity } from "../quantity/caution.ts";
import { escapeHtml } from "../quantity/section_html.ts";
import { cleanHtml } from "./clean_html.ts";
import { loadEquationRenderer } from "./equation.ts";
import { collectEvidence, type Evidence } from "./evidence.ts";
import { loadMarkdownRenderer } from "./markdown.ts";
import { joinText, type Notebook } from "./notebook.ts";
import { outputHtml, type Renderers } from "./output_html.ts";
import { REPORT_STYLE } from "./report_style.ts";

/** How a report renders. */
export interface RenderReportOptions {
  /** Title; the first heading of the notebook if left out. */
  title?: string;
  /** Who answers for the report. */
  author?: string;
  /** When the report was generated; now if left out. */
  date?: Date;
  /** Name of the notebook's file. */
  notebookName?: string;
  /** Versions of what it ran on, by name. */
  versions?: Record<string, string>;
}

const SEVERITY_WORDS: Readonly<Record<Severity, string>> = {
  serious: "Serious caution",
  caution: "Caution",
  note: "Note",
};

/** The page of an executed notebook.
 *
 * @param notebook an executed notebook @param read title, author, date, versions */
export async function reportPage(notebook: Notebook, read: RenderReportOptions): Promise<string> {
  const equation = await loadEquationRenderer();
  const renderers = { equation, markdown: await loadMarkdownRenderer(equation) };
  const evidence = collectEvidence(notebook);
  const { title, body, headings } = renderCells(notebook, renderers, read.title);
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="default-src 'none'; style-src 'unsafe-inline'; img-src data:">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escapeHtml(title)}</title>
<style>${REPORT_STYLE}</style>
</head>
<body>
<header>
<h1>${escapeHtml(title)}</h1>
${facts(read)}
${NOTICE}
</header>
<main>
${mainResults(evidence)}
${cautionList(evidence)}
${contents(headings)}
${body}
${provenance(evidence, read.versions ?? {})}
</main>
<template id="ratebook-results">${escapeHtml(JSON.stringify(evidence))}</template>
</body>
</html>
`;
}

const NOTICE =
  `<p class="notice">A calculation aid, not validated for regulated use. A fit supports a rate
law or a mechanism and never proves it; numbers hold for the conditions that were measured. Decisions on process
safety, scale-up, storage and shelf life belong to qualified review, local codes and regulators.</p>`;

interface RenderedCells {
  readonly title: string;
  readonly body: string;
  readonly headings: readonly { readonly id: string; readonly text: string }[];
}

/** The cells as HTML; the first heading becomes the title. */
function renderCells(
  notebook: Notebook,
  renderers: Renderers,
  givenTitle: string | undefined,
): RenderedCells {
  let title = givenTitle;
  const headings: { id: string; text: string }[] = [];
  let code = 0;
  const parts = notebook.cells.map((cell, i) => {
    const source = joinText(cell.source);
    if (cell.cell_type === "raw") return "";
    if (cell.cell_type === "code") {
      code++;
      const outputs = cell.outputs.map((output, j) =>
        outputHtml(output, renderers, `c${i + 1}o${j + 1}-`)
      );
      const folded = source.trim() === ""
        ? ""
        : `<details class="code"><summary>Code ${code}</summary><pre><code>${
          escapeHtml(source)
        }</code></pre></details>`;
      return `<section class="cell" id="cell-${i + 1}">${folded}${outputs.join("\n")}</section>`;
    }
    const html = cleanHtml(
      renderers.markdown(withAttachments(source, cell.attachments)),
      undefined,
    );
    return html.replaceAll(/<h([1-6])>([\s\S]*?)<\/h\1>/g, (whole, level, inner) => {
      const text = inner.replaceAll(/<[^>]*>/g, "");
      if (level === "1" && (title === undefined || title === plainText(text))) {
        title = plainText(text);
        return "";
      }
      if (level !== "1" && level !== "2") return whole;
      const id = `part-${headings.length + 1}`;
      headings.push({ id, text });
      return `<h2 id="${id}">${inner}</h2>`;
    });
  });
  return { title: title ?? "Report", body: parts.join("\n"), headings };
}

/** Markdown with the pictures that are attached to its cell put in as data. */
function withAttachments(source: string, attachments: unknown): string {
  const files = Object.entries((attachments ?? {}) as Record<string, Record<string, unknown>>);
  return files.reduce((text, [name, bundle]) => {
    const [type, data] = Object.entries(bundle).find(([key]) => key.startsWith("image/")) ?? [];
    if (type === undefined) return text;
    const bytes = joinText(data as string).replaceAll(/\s/g, "");
    return [name, encodeURIComponent(name)].reduce(
      (rest, written) =>
        rest.replaceAll(`attachment:${written}`, () => `data:${type};base64,${bytes}`),
      text,
    );
  }, source);
}

function plainText(html: string): string {
  return html.replaceAll("&lt;", "<").replaceAll("&gt;", ">").replaceAll("&quot;", '"')
    .replaceAll("&amp;", "&").trim();
}

function facts(read: { author?: string; date?: Date; notebookName?: string }): string {
  const date = (read.date ?? new Date()).toISOString().slice(0, 16).replace("T", " ") + " UTC";
  const rows = [
    ...(read.author ? [["Author", read.author]] : []),
    ["Generated", date],
    ...(read.notebookName ? [["Notebook", read.notebookName]] : []),
  ];
  return `<dl class="facts">${
    rows.map(([name, value]) => `<dt>${name}</dt><dd>${escapeHtml(value)}</dd>`).join("")
  }</dl>`;
}

function mainResults(evidence: Evidence): string {
  if (evidence.headlines.length === 0) return "";
  const rows = evidence.headlines.map(({ cell, title, label, text }) =>
    `<tr><td><a href="#cell-${cell}">${escapeHtml(title)}</a></td><td>${escapeHtml(label)}</td>` +
    `<td>${escapeHtml(text)}</td></tr>`
  );
  return `<h2>Main results</h2><table><thead><tr><th scope="col">from</th><th scope="col">quantity</th>` +
    `<th scope="col">value</th></tr></thead><tbody>${rows.join("")}</tbody></table>`;
}

function cautionList(evidence: Evidence): string {
  const list = evidence.cautions.map((caution) =>
    `<p class="caution ${caution.severity}"><span class="severity">${
      SEVERITY_WORDS[caution.severity]
    }:</span> ${escapeHtml(cautionText(caution))} <a href="#cell-${caution.cell}">(where)</a></p>`
  );
  const none = `<p>No result of this notebook raised a caution.</p>`;
  return `<h2>Cautions</h2>${list.length > 0 ? list.join("\n") : none}`;
}

/** The message, with what it is about if it does not say so itself. */
function cautionText({ message, subject }: Caution): string {
  return subject === undefined || message.includes(subject) ? message : `${subject}: ${message}`;
}

function contents(headings: RenderedCells["headings"]): string {
  if (headings.length <= 4) return "";
  return `<nav aria-label="Contents"><h2>Contents</h2><ol>${
    headings.map(({ id, text }) => `<li><a href="#${id}">${text}</a></li>`).join("")
  }</ol></nav>`;
}

function provenance(evidence: Evidence, versions: Readonly<Record<string, string>>): string {
  const files = evidence.sources.map((source) =>
    `<tr><td>${escapeHtml(source.name)}</td><td>${source.bytes}</td><td><code>${
      escapeHtml(source.sha256)
    }</code></td></tr>`
  );
  const table = files.length === 0
    ? `<p>No result of this notebook names an input file.</p>`
    : `<table><caption>Input files</caption><thead><tr><th scope="col">file</th><th scope="col">bytes</th>` +
      `<th scope="col">SHA-256</th></tr></thead><tbody>${files.join("")}</tbody></table>`;
  const seed = evidence.seeds.length > 0 ? evidence.seeds.join(", ") : "no result names one";
  const rows = [["Seed", seed], ...Object.entries(versions)];
  return `<h2>Where this comes from</h2>${table}<dl class="facts">${
    rows.map(([name, value]) => `<dt>${escapeHtml(name)}</dt><dd>${escapeHtml(value)}</dd>`).join(
      "",
    )
  }</dl>`;
}
