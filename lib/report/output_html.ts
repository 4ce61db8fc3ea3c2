import { stripVTControlCharacters } from "node:util";
import { EVIDENCE_MEDIA_TYPE } from "../quantity/result.ts";
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

const PICTURES = ["image/png", "image/jpeg", "image/gif", "image/webp"];

function dataHtml(data: MimeBundle, renderers: Renderers, idPrefix: string): string {
  const text = (type: string) => joinText(data[type] as MultilineText);
  if ("text/html" in data) return cleanHtml(text("text/html"), renderers.equation, idPrefix);
  if ("image/svg+xml" in data) {
    return `<figure>${cleanHtml(text("image/svg+xml"), undefined, idPrefix)}</figure>`;
  }
  const picture = PICTURES.find((type) => type in data);
  if (picture) {
    const alt = "text/plain" in data ? escapeHtml(text("text/plain")) : "";
    const bytes = text(picture).replaceAll(/\s/g, "");
    return `<figure><img alt="${alt}" src="data:${picture};base64,${escapeHtml(bytes)}"></figure>`;
  }
  if ("text/latex" in data) return latexHtml(text("text/latex").trim(), renderers, idPrefix);
  if ("text/markdown" in data) {
    return cleanHtml(renderers.markdown(text("text/markdown")), undefined, idPrefix);
  }
  if ("text/plain" in data) return `<pre class="value">${plain(text("text/plain"))}</pre>`;
  if ("application/json" in data) {
    const json = JSON.stringify(data["application/json"], null, 2);
    return `<pre class="value">${plain(json)}</pre>`;
  }
  const others = Object.keys(data).filter((type) => type !== EVIDENCE_MEDIA_TYPE);
  if (others.length === 0) return "";
  return `<p class="left-out">[left out: an output that is only there as ${
    escapeHtml(others.join(", "))
  }]</p>`;
}

/** LaTeX: one equation with or without dollar signs around it, or text with equations in it. */
function latexHtml(latex: string, renderers: Renderers, idPrefix: string): string {
  const [, , between] = /^(\${1,2})([^$]+)\1$/.exec(latex) ?? [];
  const mixed = between === undefined && /\$|\\\(|\\\[/.test(latex);
  if (mixed) return cleanHtml(renderers.markdown(latex), undefined, idPrefix);
  return `<p class="equation">${renderers.equation(between ?? latex, true)}</p>`;
}

function plain(text: MultilineText): string {
  return escapeHtml(stripVTControlCharacters(joinText(text)));
}
