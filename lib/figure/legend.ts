import * as Plot from "@observablehq/plot";
import { drawPanel, type Panel } from "./draw.ts";
import { INK } from "./style.ts";

/** An entry of a legend. */
export interface LegendEntry {
  /** Words. */
  readonly label: string;
  /** Colour of symbol and line. */
  readonly colour: string;
  /** Point symbol, if points stand for it. */
  readonly symbol?: string;
  /** Dash pattern, if a line stands for it. */
  readonly dash?: string;
  /** Whether a shaded band stands for it. */
  readonly shaded?: boolean;
}

const ROW_HEIGHT = 18;
const KEY_WIDTH = 26;
const CHARACTER_WIDTH = 6.6;

/** Draws a legend as rows above a figure; the plotting library's own is not SVG.
 *
 * @param entries in reading order @param width width to fill, px */
export function drawLegend(entries: readonly LegendEntry[], width: number): Panel {
  const longest = Math.max(...entries.map((entry) => entry.label.length));
  const cell = KEY_WIDTH + 24 + longest * CHARACTER_WIDTH;
  const columns = Math.max(1, Math.floor((width - 40) / cell));
  const rows = Math.ceil(entries.length / columns);
  const height = rows * ROW_HEIGHT + 6;
  const placed = entries.map((entry, i) => ({
    ...entry,
    x: 44 + (i % columns) * cell,
    y: Math.floor(i / columns) * ROW_HEIGHT + ROW_HEIGHT / 2,
  }));
  const symbols = placed.filter((entry) => entry.symbol);
  return drawPanel({
    width,
    height,
    margin: 0,
    axis: null,
    x: { type: "identity" },
    y: { type: "identity" },
    symbol: { type: "identity" },
    marks: [
      ...placed.filter((entry) => entry.shaded).map((entry) =>
        Plot.ruleY([entry], {
          y: "y",
          x1: entry.x,
          x2: entry.x + KEY_WIDTH,
          stroke: entry.colour,
          strokeWidth: 10,
          strokeOpacity: 0.22,
        })
      ),
      ...placed.filter((entry) => entry.dash).map((entry) =>
        Plot.ruleY([entry], {
          y: "y",
          x1: entry.x,
          x2: entry.x + KEY_WIDTH,
          stroke: entry.colour,
          strokeWidth: 1.6,
          strokeDasharray: entry.dash,
        })
      ),
      Plot.dot(symbols, {
        x: (entry: { x: number }) => entry.x + KEY_WIDTH / 2,
        y: "y",
        stroke: "colour",
        symbol: "symbol",
        r: 3.5,
        fill: "white",
      }),
      Plot.text(placed, {
        x: (entry: { x: number }) => entry.x + KEY_WIDTH + 6,
        y: "y",
        text: "label",
        textAnchor: "start",
        fill: INK,
      }),
    ],
  });
}
