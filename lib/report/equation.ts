import { escapeHtml } from "../quantity/section_html.ts";

/** Turns LaTeX into MathML, which browsers show without a script. */
export type EquationRenderer = (latex: string, display: boolean) => string;

/** Loads the typesetter. Chemical equations in mhchem notation, `\ce{…}`, are understood. LaTeX that it cannot
 * read stays visible as it was written, marked. */
export async function loadEquationRenderer(): Promise<EquationRenderer> {
  const { default: temml } = await import("temml");
  return (latex, display) => {
    try {
      return temml.renderToString(latex, { displayMode: display, throwOnError: true });
    } catch (error) {
      const why = error instanceof Error ? error.message : String(error);
      return `<code class="bad-equation" title="${escapeHtml(why)}">${escapeHtml(latex)}</code>`;
    }
  };
}

/** Equations between `$$`, `\[ \]` (displayed) and `\( \)` (in line). */
const DELIMITED = /\$\$([\s\S]+?)\$\$|\\\[([\s\S]+?)\\\]|\\\(([\s\S]+?)\\\)/g;

/** Whether a text holds an equation. */
export function hasEquation(text: string): boolean {
  return text.search(DELIMITED) >= 0;
}

/** Plain text as HTML, equations between delimiters typeset. */
export function typesetText(text: string, render: EquationRenderer): string {
  let html = "";
  let at = 0;
  for (const match of text.matchAll(DELIMITED)) {
    html += escapeHtml(text.slice(at, match.index));
    html += render((match[1] ?? match[2] ?? match[3]).trim(), match[3] === undefined);
    at = match.index + match[0].length;
  }
  return html + escapeHtml(text.slice(at));
}
