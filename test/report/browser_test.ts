import { afterAll, beforeAll, describe, expect, test } from "vitest";
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
