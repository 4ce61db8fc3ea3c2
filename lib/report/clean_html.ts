import { parseHTML } from "linkedom";
import { type EquationRenderer, hasEquation, typesetText } from "./equation.ts";

/** Elements that run, load or send something. */
const REMOVED =
  "script, iframe, frame, object, embed, link, meta, base, form, input, button, audio, video, " +
  "source, track, portal, noscript";

/** HTML of an output or of Markdown made fit for a report that runs nothing and loads nothing: scripts,
 * handlers and whatever is fetched are taken out, equations between `$$` are typeset. Pictures stay if their
 * data are in the page; links to other pages stay links.
 *
 * @param html a fragment @param render typesets equations in text, where there are any
 * @param idPrefix put before every id, so that two fragments cannot share one */
export function cleanHtml(
  html: string,
  render: EquationRenderer | undefined,
  idPrefix = "",
): string {
  const { document } = parseHTML(`<!doctype html><html><body><div>${html}</div></body></html>`);
  const root = document.querySelector("body > div")!;
  for (const element of root.querySelectorAll(REMOVED)) element.remove();
  for (const element of root.querySelectorAll("style")) {
    if (/@import|url\s*\(/i.test(element.textContent ?? "")) element.remove();
  }
  for (const element of root.querySelectorAll("*")) {
    for (const { name, value } of [...element.attributes]) {
      if (isUnfit(element.localName, name.toLowerCase(), value)) element.removeAttribute(name);
    }
    if (idPrefix) prefixIds(element, idPrefix);
  }
  if (render) typeset(root as unknown as Node, document as unknown as Document, render);
  return root.innerHTML;
}

function isUnfit(element: string, name: string, value: string): boolean {
  if (
    name.startsWith("on") || ["srcset", "srcdoc", "ping", "formaction", "action"].includes(name)
  ) {
    return true;
  }
  if (["src", "poster", "background", "data"].includes(name)) return !/^data:image\//i.test(value);
  if (name === "href" || name === "xlink:href") {
    return element === "a" ? !/^(https?:|mailto:|#)/i.test(value) : !value.startsWith("#");
  }
  return name === "style" &&
    /url\s*\(|expression\s*\(/i.test(value.replaceAll(/url\(#[^)]*\)/g, ""));
}

function prefixIds(element: Element, prefix: string): void {
  const id = element.getAttribute("id");
  if (id) element.setAttribute("id", prefix + id);
  for (const { name, value } of [...element.attributes]) {
    if (value.includes("url(#")) {
      element.setAttribute(name, value.replaceAll("url(#", `url(#${prefix}`));
    } else if ((name === "href" || name === "xlink:href") && value.startsWith("#")) {
      element.setAttribute(name, `#${prefix}${value.slice(1)}`);
    } else if (name === "aria-labelledby" || name === "for") {
      element.setAttribute(name, prefix + value);
    }
  }
}

/** Typesets equations in the text of an element, code left alone. */
function typeset(node: Node, document: Document, render: EquationRenderer): void {
  for (const child of [...node.childNodes]) {
    const text = child.nodeValue ?? "";
    if (child.nodeType === 3 && hasEquation(text)) {
      const holder = document.createElement("span");
      holder.innerHTML = typesetText(text, render);
      (child as ChildNode).replaceWith(...holder.childNodes);
    } else if (child.nodeType === 1 && !/^(pre|code|math|svg)$/i.test(child.nodeName)) {
      typeset(child, document, render);
    }
  }
}
