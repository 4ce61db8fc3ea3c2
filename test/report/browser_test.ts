import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { cleanHtml } from "../../lib/report/clean_html.ts";
import type { Notebook, NotebookCell } from "../../lib/report/notebook.ts";
import { renderReport } from "../../lib/report/render_report.ts";
import { writeReport, type WrittenReport } from "../../lib/report/write_report.ts";

const CHROMIUM = "/usr/bin/chromium";
const hasChromium = (() => {
  try {
    return Deno.statSync(CHROMIUM).isFile;
  } catch {
    return false;
  }
})();
if (!hasChromium) console.warn(`skipped: the report in a browser, as there is no ${CHROMIUM}`);

const NOTEBOOK = new URL("../../notebooks/rate_law_and_activation_energy.ipynb", import.meta.url);
const FLAGS = [
  "--no-sandbox",
  "--disable-gpu",
  "--disable-quic",
  "--no-first-run",
  "--disable-background-networking",
  "--disable-component-update",
  "--disable-sync",
];

describe.skipIf(!hasChromium)("the demo's report in Chromium", () => {
  // deno-lint-ignore no-explicit-any
  let browser: any, page: any, report: WrittenReport, folder: string;
  const requests: string[] = [];
  const complaints: string[] = [];

  beforeAll(async () => {
    folder = await Deno.makeTempDir();
    report = await writeReport(NOTEBOOK.pathname, { folder });
    const { chromium } = await import("playwright-core");
    browser = await chromium.launch({ executablePath: CHROMIUM, args: FLAGS });
    page = await browser.newPage({ viewport: { width: 1280, height: 800 } });
    page.on("request", (request: { url(): string }) => requests.push(request.url()));
    page.on("console", (message: { text(): string }) => complaints.push(message.text()));
    page.on("pageerror", (error: Error) => complaints.push(error.message));
    await page.goto(`file://${report.html}`);
  });

  afterAll(async () => {
    await browser?.close();
    await Deno.remove(folder, { recursive: true });
  });

  test("asks for nothing but itself and complains of nothing", () => {
    expect(requests).toEqual([`file://${report.html}`]);
    expect(complaints).toEqual([]);
  });

  test("shows its equations, figures and tables with a size", async () => {
    const sizes = await page.evaluate(`["math", "figure svg", "table"].map((selector) =>
      [...document.querySelectorAll("main " + selector)].map((e) => e.getBoundingClientRect())
        .map((box) => Math.min(box.width, box.height)))`);
    for (const [i, least] of [[0, 2], [1, 6], [2, 6]]) {
      expect(sizes[i].length).toBeGreaterThanOrEqual(least);
      expect(Math.min(...sizes[i])).toBeGreaterThan(8);
    }
  });

  test("fits its window: nothing sticks out to the side", async () => {
    const [content, window] = await page.evaluate(
      `[document.documentElement.scrollWidth, document.documentElement.clientWidth]`,
    );
    expect(content).toBeLessThanOrEqual(window);
  });

  test("unfolds its code at a click", async () => {
    const code = page.locator("details.code pre").first();
    expect(await code.isVisible()).toBe(false);
    await page.locator("details.code summary").first().click();
    expect(await code.isVisible()).toBe(true);
  });

  test("prints as pages", async () => {
    const pdf = await page.pdf({ format: "A4" });
    expect(new TextDecoder("latin1").decode(pdf.slice(0, 5))).toBe("%PDF-");
  });
});

/** Pieces of HTML that run or load something in a browser, some by being read differently by it than by the
 * parser that cleans them. */
const HOSTILE = [
  `<script>window.ran = 1</script>`,
  `<img src="https://example.org/a.png" onerror="window.ran = 1">`,
  `<svg onload="window.ran = 1"><script>window.ran = 1</script></svg>`,
  `<!--><img src=x onerror="window.ran = 1">-->`,
  `<!--a--!><img src=x onerror="window.ran = 1">-->`,
  `<noscript><p title="</noscript><img src=x onerror='window.ran = 1'>"></noscript>`,
  `<textarea><p title="</textarea><img src=x onerror='window.ran = 1'>"></textarea>`,
  `<xmp><p title="</xmp><img src=x onerror='window.ran = 1'>"></xmp>`,
  `<style><p title="</style><img src=x onerror='window.ran = 1'>"></style>`,
  `<svg><style><p title="</style><img src=x onerror='window.ran = 1'>"></style></svg>`,
  `<svg></p><style><a title="</style><img src=x onerror='window.ran = 1'>">`,
  `<iframe srcdoc="<script>parent.ran = 1</script>"></iframe>`,
  `<object data="https://example.org/h.html"></object><embed src="https://example.org/i.html">`,
  `<link rel="stylesheet" href="https://example.org/a.css"><style>@import "https://example.org/b.css";</style>`,
  `<p style="background:url(https://example.org/c.png)">x</p>`,
  `<svg><rect width="9" height="9" fill="url(https://example.org/d.svg#a)"/><use href="https://example.org/e.svg#a"/></svg>`,
  `<video src="https://example.org/f.mp4" poster="https://example.org/g.png"></video>`,
];

function displayed(html: string, i: number): NotebookCell {
  return {
    cell_type: "code",
    id: `c${i}`,
    metadata: {},
    source: "1",
    execution_count: i + 1,
    outputs: [{ output_type: "display_data", data: { "text/html": html }, metadata: {} }],
  };
}

describe.skipIf(!hasChromium)("hostile outputs in Chromium", () => {
  // deno-lint-ignore no-explicit-any
  let browser: any, page: any, folder: string;
  let asked: string[] = [];
  let told: string[] = [];
  beforeAll(async () => {
    folder = await Deno.makeTempDir();
    const { chromium } = await import("playwright-core");
    browser = await chromium.launch({ executablePath: CHROMIUM, args: FLAGS });
    page = await browser.newPage();
    page.on("request", (request: { url(): string }) => asked.push(request.url()));
    page.on("console", (message: { text(): string }) => told.push(message.text()));
    await page.route("https://**", (route: { abort(): void }) => route.abort());
  });
  afterAll(async () => {
    await browser?.close();
    await Deno.remove(folder, { recursive: true });
  });

  /** What a page asks for beside itself, what it complains of, and whether something in it ran. */
  async function opened(html: string): Promise<{ asked: string[]; told: string[]; ran: boolean }> {
    const file = `${folder}/page.html`;
    await Deno.writeTextFile(file, html);
    asked = [];
    told = [];
    await page.goto(`file://${file}`, { waitUntil: "load" });
    const ran = await page.evaluate("window.ran === 1");
    return { asked: asked.filter((url) => url !== `file://${file}`), told, ran };
  }

  test.each(HOSTILE)(
    "run or load as they are, and neither once cleaned, without any policy: %s",
    async (html) => {
      const raw = await opened(`<!doctype html><body>${html}`);
      expect(raw.ran || raw.asked.length > 0).toBe(true);
      const cleaned = await opened(`<!doctype html><body>${cleanHtml(html, undefined)}`);
      expect(cleaned).toEqual({ asked: [], told: [], ran: false });
    },
  );

  test("neither run nor load in a report, and the policy has nothing to stop", async () => {
    const cells = HOSTILE.map(displayed);
    const notebook: Notebook = { cells, metadata: {}, nbformat: 4, nbformat_minor: 5 };
    expect(await opened(await renderReport(notebook))).toEqual({ asked: [], told: [], ran: false });
  });
});
