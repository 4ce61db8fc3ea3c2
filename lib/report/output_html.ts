import { stripVTControlCharacters } from "node:util";
import { escapeHtml } from "../quantity/section_html.ts";
import { cleanHtml } from "./clean_html.ts";
import type { EquationRenderer } from "./equation.ts";
import type { MarkdownRenderer } from "./markdown.ts";
import { joinText, type MimeBundle, type MultilineText, type Output } from "./notebook.ts";

/** How text of different kinds becomes HTML. */
export interface Renderers {
  /** LaTeX to MathML. */
  readonly equation: EquationRenderer;
  /** Markdown to HTML. */
  readonly markdown: MarkdownRenderer;
}

/** An output as HTML, in the richest form that a page without script can show.
 *
 * @param output the output @param renderers for text @param idPrefix makes ids unique in the page */
export function outputHtml(output: Output, renderers: Renderers, idPrefix: string): string {
  switch (output.output_type) {
    case "stream":
      return `<pre class="stream ${output.name}">${plain(output.text)}</pre>`;
    case "error":
      return `<pre class="error">${plain(`${output.ename}: ${output.evalue}`)}</pre>`;
    default:
      return dataHtml(output.data, renderers, idPrefix);
  }
}

function dataHtml(data: MimeBundle, renderers: Renderers, idPrefix: string): string {
  const text = (type: string) => joinText(data[type] as MultilineText);
  if ("text/html" in data) return cleanHtml(text("text/html"), renderers.equation, idPrefix);
  if ("image/svg+xml" in data) {
    return `<figure>${cleanHtml(text("image/svg+xml"), undefined, idPrefix)}</figure>`;
  }
  for (const type of ["image/png", "image/jpeg"]) {
    if (!(type in data)) continue;
    const alt = "text/plain" in data ? escapeHtml(text("text/plain")) : "";
    const bytes = text(type).replaceAll(/\s/g, "");
    return `<figure><img alt="${alt}" src="data:${type};base64,${escapeHtml(bytes)}"></figure>`;
  }
  if ("text/latex" in data) {
    const latex = text("text/latex").trim().replace(/^\$+|\$+$/g, "");
    return `<p class="equation">${renderers.equation(latex, true)}</p>`;
  }
  if ("text/markdown" in data) {
    return cleanHtml(renderers.markdown(text("text/markdown")), undefined, idPrefix);
  }
  if ("text/plain" in data) return `<pre class="value">${plain(text("text/plain"))}</pre>`;
  return "";
}

function plain(text: MultilineText): string {
  return escapeHtml(stripVTControlCharacters(joinText(text)));
}
