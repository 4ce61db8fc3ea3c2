import { describe, expect, test } from "vitest";
import fc from "fast-check";
import { escapeHtml, sectionsHtml } from "../../lib/quantity/section_html.ts";
import type { Section } from "../../lib/quantity/section.ts";

const HOSTILE = `<script>alert("1 & 2")</script>`;

describe("escapeHtml", () => {
  test("replaces the characters that mean something, once", () => {
    expect(escapeHtml(`a < b & "c" > &lt;`)).toBe("a &lt; b &amp; &quot;c&quot; &gt; &amp;lt;");
  });

  test("leaves no way to open a tag or to leave an attribute in double quotes", () => {
    fc.assert(fc.property(fc.string(), (text) => {
      expect(escapeHtml(text)).not.toMatch(/[<>"]|&(?!amp;|lt;|gt;|quot;)/);
    }));
  });
});

test.each<[string, Section]>([
  ["a statement", { kind: "statement", key: "k", text: HOSTILE }],
  ["an equation", { kind: "equation", key: "k", latex: HOSTILE, text: "" }],
  ["a title", { kind: "values", title: HOSTILE, rows: [] }],
  ["a label", { kind: "values", rows: [{ key: "k", label: HOSTILE, value: 1 }] }],
  ["a value", { kind: "values", rows: [{ key: "k", label: "l", value: HOSTILE }] }],
  ["a unit", { kind: "values", rows: [{ key: "k", label: "l", value: 1, unit: HOSTILE }] }],
  ["a remark", { kind: "values", rows: [{ key: "k", label: "l", value: 1, note: HOSTILE }] }],
  ["a head", { kind: "table", key: "t", columns: [{ key: "c", label: HOSTILE }], rows: [] }],
  ["a cell", { kind: "table", key: "t", columns: [{ key: "c", label: "c" }], rows: [[HOSTILE]] }],
])("%s is escaped", (_, section) => {
  const html = sectionsHtml([section]);
  expect(html).not.toContain("<script");
  expect(html).toContain("&lt;script&gt;alert(&quot;1 &amp; 2&quot;)&lt;/script&gt;");
});

test("an equation stays LaTeX between double dollar signs", () => {
  expect(sectionsHtml([{ kind: "equation", key: "law", latex: "v = k", text: "v = k" }]))
    .toBe(`<p class="equation">$$v = k$$</p>`);
});

test("a table has a caption, column heads and a row a row", () => {
  const html = sectionsHtml([{
    kind: "table",
    key: "t",
    title: "Runs",
    columns: [{ key: "a", label: "run" }, { key: "b", label: "k" }],
    rows: [["one", 1], ["two", 2]],
  }]);
  expect(html).toContain("<caption>Runs</caption>");
  expect(html.match(/<th scope="col">/g)).toHaveLength(2);
  expect(html.match(/<tr>/g)).toHaveLength(3);
});
