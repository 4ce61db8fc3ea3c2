import * as Plot from "@observablehq/plot";
import { parseHTML } from "linkedom";
import { FONT, INK } from "./style.ts";

/** A drawn piece of a figure. */
export interface Panel {
  /** Markup between the tags of its svg element. */
  readonly content: string;
  /** Width and height, px. */
  readonly width: number;
  readonly height: number;
}

/** Draws one plot to markup. Needs no browser: the plot gets a document of its own.
 *
 * @param options options of the plotting library; width and height are required */
export function drawPanel(options: Plot.PlotOptions & { width: number; height: number }): Panel {
  const { document } = parseHTML("<html><body></body></html>");
  const plot = Plot.plot({
    ...options,
    document: document as unknown as Document,
    style: { fontFamily: FONT, fontSize: "12px", color: INK, background: "none" },
  });
  for (const style of plot.querySelectorAll("style")) style.remove();
  const content = plot.innerHTML
    .replaceAll("currentColor", INK)
    .replaceAll(/ class="[^"]*"/g, "")
    .replaceAll("clippath", "clipPath");
  return { content, width: options.width, height: options.height };
}

/** A panel put at a place. */
export interface PlacedPanel {
  readonly panel: Panel;
  readonly x: number;
  readonly y: number;
}

/** Puts panels together into one standalone SVG document. */
export function composeSvg(placed: readonly PlacedPanel[], alt: string): string {
  const width = Math.max(...placed.map(({ panel, x }) => x + panel.width));
  const height = Math.max(...placed.map(({ panel, y }) => y + panel.height));
  const body = placed.map(({ panel, x, y }, i) => {
    const own = uniqueIds(panel.content, i);
    return `<g transform="translate(${x},${y})">${own}</g>`;
  }).join("");
  return `<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink" ` +
    `width="${width}" height="${height}" viewBox="0 0 ${width} ${height}" role="img" ` +
    `aria-label="${attribute(alt)}" font-family="${FONT}" font-size="12" fill="${INK}" ` +
    `text-anchor="middle" style="max-width:100%;height:auto;background:#fff">` +
    `<title>${attribute(alt)}</title>${body}</svg>`;
}

/** Ids of clip paths made unique between panels. */
function uniqueIds(content: string, panel: number): string {
  return content.replaceAll(/id="([^"]+)"/g, `id="p${panel}-$1"`)
    .replaceAll(/url\(#([^)]+)\)/g, `url(#p${panel}-$1)`);
}

function attribute(text: string): string {
  return text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll('"', "&quot;");
}
