import { parseHTML } from "linkedom";
import { describe, expect, test } from "vitest";
import { Estimate } from "../../lib/quantity/estimate.ts";
import { EVIDENCE_MEDIA_TYPE } from "../../lib/quantity/result.ts";
import type { Notebook, NotebookCell, Output } from "../../lib/report/notebook.ts";
import { renderReport } from "../../lib/report/render_report.ts";

function markdown(source: string): NotebookCell {
  return { cell_type: "markdown", id: crypto.randomUUID().slice(0, 8), metadata: {}, source };
}

function code(source: string, ...data: Record<string, unknown>[]): NotebookCell {
  const outputs = data.map((d): Output => ({ output_type: "display_data", data: d, metadata: {} }));
  const id = crypto.randomUUID().slice(0, 8);
  return { cell_type: "code", id, metadata: {}, source, execution_count: 1, outputs };
}

function notebook(...cells: NotebookCell[]): Notebook {
  let count = 0;
  const executed = cells.map((cell) =>
    cell.cell_type === "code" ? { ...cell, execution_count: ++count } : cell
  );
  return { cells: executed, metadata: {}, nbformat: 4, nbformat_minor: 5 };
}

async function page(
  cells: NotebookCell[],
  options = {},
): Promise<{ html: string; document: Document }> {
  const html = await renderReport(notebook(...cells), options);
  return { html, document: parseHTML(html).document as unknown as Document };
}

describe("nothing runs and nothing is loaded", () => {
  const attack =
    `<p onclick="steal()">text<script>steal()</script><img src="https://example.org/x.png">` +
    `<a href="javascript:steal()">a</a><a href="https://example.org">b</a><iframe src="x"></iframe>` +
    `<link rel="stylesheet" href="https://example.org/x.css"><style>@import url(x.css)</style>` +
    `<svg><image href="https://example.org/y.png"></image></svg>` +
    `<div style="background:url(https://example.org/z.png)">c</div><form action="x"><input></form></p>`;

  test.each([
    ["an HTML output", code("1", { "text/html": attack })],
    [
      "an SVG output",
      code("1", { "image/svg+xml": `<svg onload="x()"><script>x()</script></svg>` }),
    ],
    ["Markdown", markdown(attack)],
  ])("%s", async (_, cell) => {
    const { html, document } = await page([cell]);
    expect(html).not.toMatch(
      /<script|<iframe|<link|<form|<input|javascript:|onclick|onload|@import/i,
    );
    const main = document.querySelector("main")!;
    for (const element of main.querySelectorAll("*")) {
      for (const { name, value } of element.attributes) {
        if (name === "href" && element.localName === "a") continue;
        expect(`${name}=${value}`).not.toMatch(/https?:|url\((?!#)/);
      }
    }
  });

  test("the page forbids it as well", async () => {
    const { document } = await page([markdown("# T")]);
    const policy = document.querySelector("meta[http-equiv='Content-Security-Policy']");
    expect(policy?.getAttribute("content")).toBe(
      "default-src 'none'; style-src 'unsafe-inline'; img-src data:",
    );
  });
});

describe("equations become MathML", () => {
  test.each([
    ["Markdown, in line", markdown("The law $k = A e^{-E/RT}$ holds"), 1],
    ["Markdown, displayed over lines", markdown("$$\nv = k[A]\n$$"), 1],
    ["Markdown in brackets", markdown(String.raw`\(a\) and \[b\]`), 2],
    ["HTML output", code("1", { "text/html": "<p>$$v = k$$ and \\(x\\)</p>" }), 2],
    ["LaTeX output", code("1", { "text/latex": "$\\frac{a}{b}$" }), 1],
    ["chemistry", markdown(String.raw`$\ce{X2 <=>[k1][k-1] 2 X}$`), 1],
  ])("%s", async (_, cell, count) => {
    const { document } = await page([cell]);
    expect(document.querySelectorAll("math").length).toBe(count);
  });

  test("but money and code do not", async () => {
    const { html, document } = await page([
      markdown("It costs $5 or $6, and `$x$` is code"),
      code("1", { "text/html": "<pre>$$x$$</pre>" }),
    ]);
    expect(document.querySelector("math")).toBeNull();
    expect(html).toContain("$5 or $6");
  });

  test.each(["\\frac{", "\\unknown{x}"])(
    "LaTeX that cannot be read stays visible: %s",
    async (latex) => {
      const { document } = await page([markdown(`$${latex}$`)]);
      expect(document.querySelector("code.bad-equation")?.textContent).toBe(latex);
    },
  );

  test("text with equations in it, displayed as LaTeX", async () => {
    const { document } = await page([code("1", { "text/latex": "with $a$ and $b$" })]);
    expect(document.querySelectorAll("math").length).toBe(2);
    expect(document.querySelector(".cell")?.textContent).toContain("with");
  });
});

describe("front matter", () => {
  const evidence = (extra: Record<string, unknown>) => ({
    "text/plain": "x",
    [EVIDENCE_MEDIA_TYPE]: { kind: "k", title: "Fit", cautions: [], ...extra },
  });
  const note = { code: "n", severity: "note", message: "a small thing <b>" };
  const serious = { code: "s", severity: "serious", message: "too few temperatures" };
  const cells = [
    markdown("# Title of all & more\n\nIntro"),
    code("const a = 1 < 2;", evidence({ cautions: [note, serious] })),
    code(
      "2",
      evidence({
        cautions: [serious],
        sources: [{ name: "runs.csv", sha256: "ab".repeat(32), bytes: 12 }],
        seed: 99,
        headlines: [{ label: "Ea", text: "84.1 ± 0.1 kJ/mol" }],
      }),
    ),
    ...["One", "Two", "Three", "Four", "Five"].map((name) => markdown(`## ${name}`)),
  ];
  const options = {
    author: "A. Nonymous",
    date: new Date("2026-03-01T10:20:00Z"),
    notebookName: "study.ipynb",
    versions: { Deno: "2.9.6" },
  };

  test("title, author, date, versions, hashes, seed, results", async () => {
    const { document } = await page(cells, options);
    const words = document.body.textContent!;
    expect(document.querySelector("h1")?.textContent).toBe("Title of all & more");
    expect(document.querySelector("title")?.textContent).toBe("Title of all & more");
    for (
      const expected of [
        "A. Nonymous",
        "2026-03-01 10:20 UTC",
        "study.ipynb",
        "2.9.6",
        "runs.csv",
        "ab".repeat(32),
        "99",
        "84.1 ± 0.1 kJ/mol",
        "not validated for regulated use",
      ]
    ) expect(words).toContain(expected);
  });

  test("every caution, the serious first, each once, in words", async () => {
    const { document } = await page(cells, options);
    const front = [...document.querySelectorAll("main > p.caution")].map((p) => p.textContent);
    expect(front.length).toBe(2);
    expect(front[0]).toContain("Serious caution: too few temperatures");
    expect(front[1]).toContain("Note: a small thing <b>");
  });

  test("contents link to headings that are there", async () => {
    const { document } = await page(cells, options);
    const links = [...document.querySelectorAll("nav a")].map((a) => a.getAttribute("href")!);
    expect(links.length).toBe(5);
    for (const link of links) expect(document.querySelector(link)).not.toBeNull();
  });

  test("code is folded and escaped, results are data in a template", async () => {
    const { document } = await page(cells, options);
    expect(document.querySelector("details.code code")?.textContent).toBe("const a = 1 < 2;");
    expect(document.querySelector("details.code")?.hasAttribute("open")).toBe(false);
    const data = JSON.parse(document.querySelector("#ratebook-results")!.textContent!);
    expect(data.cautions[0].code).toBe("s");
  });
});

describe("outputs", () => {
  const shown = async (data: Record<string, unknown>) =>
    (await page([code("1", data)])).document.querySelector(".cell")!;

  test("are shown in the richest form, JSON only where there is no other", async () => {
    const all = {
      "text/html": "<b>html</b>",
      "image/svg+xml": "<svg></svg>",
      "image/png": "AA==",
      "text/latex": "x",
      "text/markdown": "*md*",
      "text/plain": "plain",
      "application/json": { a: 1 },
    };
    const found = [
      "b",
      "svg",
      "img[src='data:image/png;base64,AA==']",
      "math",
      "em",
      "pre.value",
      "pre.value",
    ];
    const data: Record<string, unknown> = { ...all };
    for (const [i, type] of Object.keys(all).entries()) {
      const cell = await shown(data);
      expect(cell.querySelector(found[i]), type).not.toBeNull();
      expect(cell.textContent.includes('"a": 1')).toBe(type === "application/json");
      delete data[type];
    }
  });

  test("that no page without script can show are named", async () => {
    expect((await shown({ "application/x-chart": {} })).textContent).toContain(
      "application/x-chart",
    );
  });

  test("that are data for the report only show nothing", async () => {
    const cell = await shown({ [EVIDENCE_MEDIA_TYPE]: { kind: "k", title: "t", cautions: [] } });
    expect([...cell.children].map((e) => e.localName)).toEqual(["details"]);
  });
});

test("a picture attached to a Markdown cell is in the page", async () => {
  const cell = {
    ...markdown("![setup](attachment:set%20up.png)"),
    attachments: { "set up.png": { "image/png": "AA==" } },
  } as NotebookCell;
  const { document } = await page([cell]);
  expect(document.querySelector("img")?.getAttribute("src")).toBe("data:image/png;base64,AA==");
});

test("figures keep their ids apart", async () => {
  const svg = `<svg><defs><clipPath id="a"><rect/></clipPath></defs><g clip-path="url(#a)"/></svg>`;
  const { document } = await page([
    code("1", { "image/svg+xml": svg }),
    code("2", { "image/svg+xml": svg }),
  ]);
  const ids = [...document.querySelectorAll("[id]")].map((e) => e.id);
  expect(new Set(ids).size).toBe(ids.length);
  for (const group of document.querySelectorAll("g")) {
    const target = /url\((#.*)\)/.exec(group.getAttribute("clip-path")!)![1];
    expect(document.querySelector(target)).not.toBeNull();
  }
});

test("terminal colours do not reach the page", async () => {
  const estimate = new Estimate({ value: 1, standardError: 0.1, unit: "s" });
  const { html } = await page([code("1", { "text/plain": `\x1b[33m${estimate}\x1b[39m` })]);
  expect(html).toContain("1.00 ± 0.10 s");
  expect(html).not.toContain("\x1b");
});
