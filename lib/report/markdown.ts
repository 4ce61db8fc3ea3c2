import type { EquationRenderer } from "./equation.ts";

/** Turns Markdown into HTML. */
export type MarkdownRenderer = (text: string) => string;

const CLOSING: Readonly<Record<string, string>> = {
  "$$": "$$",
  "\\[": "\\]",
  "\\(": "\\)",
  "$": "$",
};

/** Loads the Markdown renderer, with equations between `$`, `$$`, `\( \)` and `\[ \]` as notebooks have them.
 *
 * @param render typesets an equation */
export async function loadMarkdownRenderer(render: EquationRenderer): Promise<MarkdownRenderer> {
  const { default: MarkdownIt } = await import("markdown-it");
  const markdown = new MarkdownIt({ html: true, linkify: false });
  // deno-lint-ignore no-explicit-any
  markdown.inline.ruler.before("escape", "equation", (state: any, silent: boolean) => {
    const rest: string = state.src.slice(state.pos);
    const open = Object.keys(CLOSING).find((mark) => rest.startsWith(mark));
    if (open === undefined) return false;
    const end = rest.indexOf(CLOSING[open], open.length);
    const latex = end < 0 ? "" : rest.slice(open.length, end);
    // A dollar sign before a blank or a figure behind the closing one is money, not an equation.
    if (latex.trim() === "" || latex.includes("`")) return false;
    if (open === "$" && (/^\s|\s$/.test(latex) || /^\d/.test(rest.slice(end + 1)))) return false;
    if (!silent) {
      const token = state.push("html_inline", "", 0);
      token.content = render(latex.trim(), open === "$$" || open === "\\[");
    }
    state.pos += end + CLOSING[open].length;
    return true;
  });
  return (text) => markdown.render(text);
}
