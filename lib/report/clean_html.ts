import { parseHTML } from "linkedom";
import { type EquationRenderer, hasEquation, typesetText } from "./equation.ts";

/** Elements that go without a word: they show nothing by themselves, or would be read otherwise by a browser. */
const REMOVED =
  "link, meta, base, input, button, select, textarea, source, track, noscript, noembed, noframes, " +
  "template, xmp, plaintext, animate, animatemotion, animatetransform, set";

/** Elements that would show something by running or loading it: a note says that they were left out. */
const LEFT_OUT = "iframe, frame, object, embed, portal, audio, video, canvas";

/** Elements that go while what is in them stays. */
const UNWRAPPED = "html, head, body, form";

/** Attributes whose value is text and nothing else. */
const TEXT_ATTRIBUTES = new Set(["title", "alt", "aria-label", "id", "class"]);

/** Attributes that name the ids of other elements. */
const REFERENCES = new Set(["aria-labelledby", "aria-describedby", "for", "headers"]);

/** HTML of an output or of Markdown made fit for a report that runs nothing and loads nothing: scripts,
 * handlers, style sheets and whatever is fetched are taken out, with a note where something to be seen is lost;
 * equations between `$$` are typeset. Pictures stay if their data are in the page; links to other pages stay
 * links. The content security policy of the page is the second lock on the same door.
 *
 * @param html a fragment @param render typesets equations in text, where there are any
 * @param idPrefix put before every id, so that two fragments cannot share one */
export function cleanHtml(
  html: string,
  render: EquationRenderer | undefined,
  idPrefix = "",
): string {
  const { document } = parseHTML("<!doctype html><html><body><div></div></body></html>");
  const root = document.querySelector("div") as unknown as HTMLElement;
  root.innerHTML = html;
  removeElements(root);
  removeComments(root);
  for (const element of root.querySelectorAll("*")) {
    for (const { name, value } of [...element.attributes]) {
      if (isUnfit(element.localName, name.toLowerCase(), value)) element.removeAttribute(name);
    }
    if (element.localName === "img" && !element.hasAttribute("src")) {
      leaveOut(element, `picture ${element.getAttribute("alt") ?? ""}`.trim());
    }
    if (idPrefix) prefixIds(element, idPrefix);
  }
  if (render) typeset(root, root.ownerDocument, render);
  return root.innerHTML;
}

function removeElements(root: HTMLElement): void {
  const scripts = [...root.querySelectorAll("script")];
  for (const element of scripts) element.remove();
  for (const element of root.querySelectorAll(REMOVED)) element.remove();
  for (const element of root.querySelectorAll(LEFT_OUT)) leaveOut(element, element.localName);
  for (const element of root.querySelectorAll("title")) {
    if (!element.closest("svg")) element.remove();
  }
  // A style sheet reaches the whole page and could hide a caution; figures need theirs.
  for (const element of root.querySelectorAll("style")) {
    if (!element.closest("svg") || loads(element.textContent ?? "")) element.remove();
  }
  for (const element of root.querySelectorAll(UNWRAPPED)) {
    element.replaceWith(...element.childNodes);
  }
  if (scripts.length > 0) root.append(note(root.ownerDocument, "script"));
}

function leaveOut(element: Element, what: string): void {
  element.replaceWith(note(element.ownerDocument, what));
}

function note(document: Document, what: string): HTMLElement {
  const element = document.createElement("span");
  element.className = "left-out";
  element.textContent = `[left out: ${what}; a report runs and loads nothing]`;
  return element;
}

/** Comments end at other places for a browser than for the parser used here. */
function removeComments(node: Node): void {
  for (const child of [...node.childNodes]) {
    if (child.nodeType === 1) removeComments(child);
    else if (child.nodeType !== 3) child.remove();
  }
}

function isUnfit(element: string, name: string, value: string): boolean {
  if (name.startsWith("on") || ["srcset", "srcdoc", "ping", "formaction"].includes(name)) {
    return true;
  }
  if (["src", "poster", "background", "data"].includes(name)) return !isPictureData(value);
  if (name === "href" || name === "xlink:href") {
    if (element === "a") return !/^(https?:|mailto:|#)/i.test(value);
    return !value.startsWith("#") && !(element === "image" && isPictureData(value));
  }
  return !TEXT_ATTRIBUTES.has(name) && loads(value);
}

function isPictureData(value: string): boolean {
  return /^data:image\//i.test(value);
}

/** Whether a piece of CSS may load something: a URL that is no fragment of this page, an import, or an escape
 * behind which either could hide. */
function loads(css: string): boolean {
  const elsewhere = css.replaceAll(/url\(\s*(["']?)#[^)]*\)/gi, "");
  return /url\s*\(|image-set\s*\(|src\s*\(|expression\s*\(|@import|\\/i.test(elsewhere);
}

function prefixIds(element: Element, prefix: string): void {
  const id = element.getAttribute("id");
  if (id) element.setAttribute("id", prefix + id);
  for (const { name, value } of [...element.attributes]) {
    if (REFERENCES.has(name)) {
      const ids = value.trim().split(/\s+/).map((one) => prefix + one);
      element.setAttribute(name, ids.join(" "));
    } else if ((name === "href" || name === "xlink:href") && value.startsWith("#")) {
      element.setAttribute(name, `#${prefix}${value.slice(1)}`);
    } else if (/url\(\s*["']?#/i.test(value)) {
      element.setAttribute(name, value.replaceAll(/(url\(\s*["']?#)/gi, `$1${prefix}`));
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
