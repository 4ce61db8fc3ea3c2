import { parseHTML } from "linkedom";
import { describe, expect, test } from "vitest";
import { FIGURES } from "./figures.ts";
import { expectFigure } from "./snapshot.ts";

const drawn = await Promise.all(
  Object.entries(FIGURES).map(async ([name, draw]) => {
    const figure = draw();
    return [name, { draw, figure, svg: await figure.svg() }] as const;
  }),
);

describe.each(drawn)("figure %s", (name, { draw, figure, svg }) => {
  test("is the picture in snapshots/", () => expectFigure(name, svg));

  test("is a standalone SVG with words and a font that exists everywhere", () => {
    expect(svg).toMatch(/^<svg xmlns="http:\/\/www\.w3\.org\/2000\/svg"/);
    expect(svg).toContain('font-family="Arial, Helvetica');
    expect(svg).not.toMatch(/currentColor|system-ui|NaN|undefined|<script|<style/);
    expect(figure.alt.length).toBeGreaterThan(30);
  });

  test("names its axes with units, and no two ids are the same", () => {
    const { document } = parseHTML(svg);
    const words = [...document.querySelectorAll("text")].map((node) => node.textContent);
    expect(words.some((w) => /time \/ (s|min|h|d)|1000 K \/ T/.test(w ?? ""))).toBe(true);
    const ids = [...document.querySelectorAll("[id]")].map((node) => node.id);
    expect(new Set(ids).size).toBe(ids.length);
  });

  test("draws the same picture twice", async () => expect(await draw().svg()).toBe(svg));

  test("shows itself in a notebook", async () => {
    // deno-lint-ignore no-explicit-any
    const bundle = await (figure as any)[Symbol.for("Jupyter.display")]();
    expect(bundle).toEqual({ "image/svg+xml": svg, "text/plain": `Figure: ${figure.alt}` });
  });
});
