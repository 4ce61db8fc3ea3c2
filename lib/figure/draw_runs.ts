import * as Plot from "@observablehq/plot";
import type { AxisUnit } from "./axis.ts";
import { composeSvg, drawPanel, type PlacedPanel } from "./draw.ts";
import { frameMarks } from "./frame.ts";
import { drawLegend, type LegendEntry } from "./legend.ts";
import { COLOURS, cycle, DASHES, SYMBOLS } from "./style.ts";

/** Readings of a run, and the fitted curve through them where there is one; canonical units. */
export interface Series {
  /** What the legend calls it. */
  readonly name: string;
  /** Readings. */
  readonly points: readonly { x: number; y: number }[];
  /** Fitted signal at a time. */
  readonly curve?: (x: number) => number;
}

/** What a figure of runs shows. */
export interface RunsView {
  /** One a run. */
  readonly series: readonly Series[];
  /** Title of the vertical axis, without unit. */
  readonly title: string;
  /** Unit of time. */
  readonly time: AxisUnit;
  /** Unit of the signal. */
  readonly value: AxisUnit;
  /** Width of the figure, px. */
  readonly width: number;
  /** What is seen. */
  readonly alt: string;
}

/** Draws runs against time. */
export function drawRuns(view: RunsView): string {
  const { time, value, width } = view;
  const times = view.series.flatMap((series) => series.points.map((point) => point.x));
  const values = view.series.flatMap((series) => series.points.map((point) => point.y));
  const styled = view.series.map((series, i) => ({
    ...series,
    colour: cycle(COLOURS, i),
    symbol: cycle(SYMBOLS, i),
    dash: cycle(DASHES, i),
    points: series.points.map((p) => ({ x: time.from(p.x), y: value.from(p.y) })),
  }));
  const [first, last] = [Math.min(0, ...times), Math.max(...times)];
  const grid = Array.from({ length: 161 }, (_, i) => first + (last - first) * i / 160);
  const panel = drawPanel({
    width,
    height: Math.round(width * 0.58),
    marginLeft: 66,
    marginBottom: 46,
    marginTop: 8,
    marginRight: 14,
    x: { nice: false, insetRight: 8, insetLeft: 8 },
    y: { nice: true, zero: Math.min(...values) >= 0, insetTop: 8 },
    symbol: { type: "identity" },
    marks: [
      ...frameMarks({
        x: { title: "time", unit: time.unit },
        y: { title: view.title, unit: value.unit },
      }),
      ...styled.filter((series) => series.curve).map((series) =>
        Plot.line(grid.map((t) => ({ x: time.from(t), y: value.from(series.curve!(t)) })), {
          x: "x",
          y: "y",
          stroke: series.colour,
          strokeWidth: 1.5,
          strokeDasharray: series.dash,
        })
      ),
      ...styled.map((series) =>
        Plot.dot(series.points as { x: number; y: number }[], {
          x: "x",
          y: "y",
          stroke: series.colour,
          fill: "white",
          r: 3,
          symbol: series.symbol as Plot.SymbolType,
        })
      ),
    ],
  });
  const legend = styled.length > 1
    ? drawLegend(legendEntries(styled, styled.some((series) => series.curve)), width)
    : undefined;
  const placed: PlacedPanel[] = legend
    ? [{ panel: legend, x: 0, y: 4 }, { panel, x: 0, y: legend.height + 4 }]
    : [{ panel, x: 0, y: 0 }];
  return composeSvg(placed, view.alt);
}

function legendEntries(
  styled: readonly { name: string; colour: string; symbol: string; dash: string }[],
  lines: boolean,
): LegendEntry[] {
  return styled.map((series) => ({
    label: series.name,
    colour: series.colour,
    symbol: series.symbol,
    dash: lines ? series.dash : undefined,
  }));
}
