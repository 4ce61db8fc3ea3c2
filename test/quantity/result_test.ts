import { describe, expect, test } from "vitest";
import type { Caution } from "../../lib/quantity/caution.ts";
import { Estimate } from "../../lib/quantity/estimate.ts";
import { EVIDENCE_MEDIA_TYPE, Result, type Source } from "../../lib/quantity/result.ts";
import type { Section } from "../../lib/quantity/section.ts";

const SOURCE: Source = { name: "runs.csv", sha256: "ab".repeat(32), bytes: 12 };

class Decay extends Result {
  override readonly kind = "decay";
  override readonly sources = [SOURCE];
  override readonly seed = 7;
  override readonly cautions: readonly Caution[] = [
    { code: "short-run", severity: "serious", message: "Followed for < 1 half-life" },
  ];
  override get title(): string {
    return "Decay of A & B";
  }
  protected override headlineKeys(): readonly string[] {
    return ["k"];
  }
  override sections(): readonly Section[] {
    return [
      {
        kind: "values",
        rows: [
          {
            key: "k",
            label: "rate constant",
            value: new Estimate({ value: 0.29020, standardError: 0.00192, unit: "min⁻¹" }),
          },
          { key: "halfLife", label: "half-life", value: 2.3885, unit: "min" },
          { key: "f", label: "F", value: NaN },
        ],
      },
      { kind: "values", key: "quality", rows: [{ key: "readings", label: "readings", value: 9 }] },
      {
        kind: "table",
        key: "residuals",
        columns: [{ key: "time", label: "t [min]" }, { key: "residual", label: "e" }],
        rows: [[0, 0.001], [1, NaN]],
      },
      { kind: "equation", key: "law", latex: "-\\frac{d[A]}{dt} = k[A]", text: "−d[A]/dt = k[A]" },
      { kind: "statement", key: "verdict", text: "First order <likely>." },
    ];
  }
}

const result = new Decay();
const display = (result as unknown as Record<symbol, () => Record<string, unknown>>)[
  Symbol.for("Jupyter.display")
];
const bundle = display.call(result) as Record<string, string>;

describe("one list of sections gives every view", () => {
  const shown = [
    "0.2902 ± 0.0019 min⁻¹",
    "half-life",
    "not determined",
    "readings",
    "t [min]",
  ];

  test.each(shown)("%s is in the text and in the HTML", (words) => {
    expect(result.toString()).toContain(words);
    expect(bundle["text/html"]).toContain(words);
  });

  test("the text is the title, the sections and every caution", () => {
    const lines = result.toString().split("\n");
    expect(lines[0]).toBe("Decay of A & B");
    expect(lines).toContain("First order <likely>.");
    expect(lines.at(-1)).toBe("Serious caution: Followed for < 1 half-life");
  });

  test("the HTML is escaped, title and cautions too", () => {
    const html = bundle["text/html"];
    expect(html).toContain("<strong>Decay of A &amp; B</strong>");
    expect(html).toContain("First order &lt;likely&gt;.");
    expect(html).toContain("Serious caution: Followed for &lt; 1 half-life");
    expect(html).not.toMatch(/<(script|style|link)/);
  });
});

describe("plain data", () => {
  const json = JSON.parse(JSON.stringify(result));

  test("has stable names, with units on bare numbers", () => {
    expect(json.kind).toBe("decay");
    expect(json.k).toMatchObject({ value: 0.2902, standardError: 0.00192, unit: "min⁻¹" });
    expect(json.halfLife).toEqual({ value: 2.3885, unit: "min" });
    expect(json.quality).toEqual({ readings: 9 });
    expect(json.verdict).toBe("First order <likely>.");
    expect(json.law).toBe("−d[A]/dt = k[A]");
  });

  test("has null for what is not finite", () => {
    expect(result.toJSON().f).toBeNull();
    expect(json.residuals).toEqual([{ time: 0, residual: 0.001 }, { time: 1, residual: null }]);
  });

  test("carries cautions, files and seed", () => {
    expect(json.cautions).toEqual(result.cautions);
    expect(json.sources).toEqual([SOURCE]);
    expect(json.seed).toBe(7);
  });
});

describe("a notebook gets", () => {
  test("text, HTML and the evidence for a report", () => {
    expect(Object.keys(bundle)).toEqual(["text/plain", "text/html", EVIDENCE_MEDIA_TYPE]);
    expect(bundle["text/plain"]).toBe(result.toString());
  });

  test("evidence with cautions, files, seed, headline values and data", () => {
    expect(bundle[EVIDENCE_MEDIA_TYPE]).toEqual({
      kind: "decay",
      title: "Decay of A & B",
      cautions: result.cautions,
      sources: [SOURCE],
      seed: 7,
      headlines: [{ label: "rate constant", text: "0.2902 ± 0.0019 min⁻¹" }],
      data: result.toJSON(),
    });
  });

  test("nothing that JSON cannot hold", () => {
    expect(JSON.parse(JSON.stringify(bundle))).toEqual(bundle);
  });
});

test("console.log prints the text", () => {
  expect(Deno.inspect(result)).toBe(result.toString());
});
