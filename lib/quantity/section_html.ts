import { cellText, type Section } from "./section.ts";

/** Sections as HTML without script or style of its own; equations as LaTeX between `$$`, which
 * notebooks typeset and reports turn into MathML. */
export function sectionsHtml(sections: readonly Section[]): string {
  return sections.map(html).join("\n");
}

/** Text with the characters that mean something in HTML replaced. */
export function escapeHtml(text: string): string {
  return text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll(">", "&gt;")
    .replaceAll('"', "&quot;");
}

function html(section: Section): string {
  switch (section.kind) {
    case "statement":
      return `<p>${escapeHtml(section.text)}</p>`;
    case "equation":
      return `<p class="equation">$$${escapeHtml(section.latex)}$$</p>`;
    case "values":
      return table(
        section.title,
        "",
        section.rows.map((row) => {
          const note = row.note ? ` <small>(${escapeHtml(row.note)})</small>` : "";
          const value = escapeHtml(cellText(row.value, row.unit));
          return `<tr><th scope="row">${escapeHtml(row.label)}</th><td>${value}${note}</td></tr>`;
        }),
      );
    case "table":
      return table(
        section.title,
        `<thead><tr>${
          section.columns.map((c) => `<th scope="col">${escapeHtml(c.label)}</th>`).join("")
        }</tr></thead>`,
        section.rows.map((row) =>
          `<tr>${row.map((cell) => `<td>${escapeHtml(cellText(cell))}</td>`).join("")}</tr>`
        ),
      );
  }
}

function table(title: string | undefined, head: string, rows: readonly string[]): string {
  const caption = title ? `<caption>${escapeHtml(title)}</caption>` : "";
  return `<table>${caption}${head}<tbody>${rows.join("")}</tbody></table>`;
}
