import { cellText, type Section } from "./section.ts";

/** Sections as lines for a terminal, columns aligned. */
export function sectionsText(sections: readonly Section[]): string[] {
  return sections.flatMap((section) => {
    const title = "title" in section && section.title ? [section.title] : [];
    return [...title, ...lines(section)];
  });
}

function lines(section: Section): string[] {
  switch (section.kind) {
    case "statement":
      return [section.text];
    case "equation":
      return [`  ${section.text}`];
    case "values":
      return aligned(section.rows.map((row) => [
        `  ${row.label}`,
        cellText(row.value, row.unit) + (row.note ? `   (${row.note})` : ""),
      ]));
    case "table":
      return aligned([
        section.columns.map((column, i) => (i === 0 ? "  " : "") + column.label),
        ...section.rows.map((row) => row.map((cell, i) => (i === 0 ? "  " : "") + cellText(cell))),
      ]);
  }
}

function aligned(rows: readonly (readonly string[])[]): string[] {
  const widths: number[] = [];
  for (const row of rows) {
    row.forEach((cell, i) => widths[i] = Math.max(widths[i] ?? 0, width(cell)));
  }
  return rows.map((row) =>
    row.map((cell, i) => cell + " ".repeat(widths[i] - width(cell))).join("   ").trimEnd()
  );
}

/** Characters on screen: a combining mark takes no room. */
function width(text: string): number {
  return [...text.normalize("NFC").replaceAll(/\p{M}/gu, "")].length;
}
