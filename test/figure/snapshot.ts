import { expect } from "vitest";

const FOLDER = new URL("./snapshots/", import.meta.url);

/** Compares a figure with its picture in `snapshots/`, numbers rounded to 2 decimals. Where it differs,
 * the new picture is left beside it as `….changed.svg`; with UPDATE_FIGURES=1 it takes its place.
 *
 * @param name file name without ending @param svg the picture */
export function expectFigure(name: string, svg: string): void {
  const drawn = rounded(svg);
  const file = new URL(`${name}.svg`, FOLDER);
  const changed = new URL(`${name}.changed.svg`, FOLDER);
  const expected = read(file);
  if (expected === drawn) return;
  if (expected === undefined || Deno.env.get("UPDATE_FIGURES") === "1") {
    Deno.mkdirSync(FOLDER, { recursive: true });
    Deno.writeTextFileSync(file, drawn);
    if (Deno.env.get("CI")) expect(expected, `there is no picture ${name}.svg`).toBeDefined();
    return;
  }
  Deno.writeTextFileSync(changed, drawn);
  expect(drawn, `${name}.svg has changed: look at ${name}.changed.svg`).toBe(expected);
}

function rounded(svg: string): string {
  const short = (text: string) =>
    text.replaceAll(/-?\d+\.\d{3,}/g, (n) => String(Number(Number(n).toFixed(2))));
  // Only inside tags: what a reader sees stays as it is.
  return svg.replaceAll(/<[^>]*>/g, short).replaceAll("><", ">\n<") + "\n";
}

function read(file: URL): string | undefined {
  try {
    return Deno.readTextFileSync(file);
  } catch (error) {
    if (error instanceof Deno.errors.NotFound) return undefined;
    throw error;
  }
}
