import * as Plot from "@observablehq/plot";
import { ZERO_CELSIUS } from "../quantity/constants.ts";
import type { ArrheniusFit } from "../temperature/arrhenius_fit.ts";
import { powerTick, powerTicks } from "./axis.ts";
import { composeSvg, drawPanel, type Panel, type PlacedPanel } from "./draw.ts";
import { frameMarks } from "./frame.ts";
import { drawLegend } from "./legend.ts";
import { COLOURS, INK } from "./style.ts";

/** What an Arrhenius figure shows. */
export interface ArrheniusView {
  /** The fit. */
  readonly fit: ArrheniusFit;
  /** Temperatures to draw the line out to, K. */
  readonly to: readonly number[];
  /** Coverage of the bands. */
  readonly level: number;
  /** The same in words. */
  readonly percent: string;
  /** Width of the figure, px. */
  readonly width: number;
  /** What is seen. */
  readonly alt: string;
}

/** Draws rate constants and the Arrhenius line, with the deviations below. */
export function drawArrhenius({ fit, to, level, percent, width, alt }: ArrheniusView): string {
  const [low, high] = fit.temperatureRange;
  const ends = [Math.min(low, ...to), Math.max(high, ...to)];
  const pad = 0.03 * (1 / ends[0] - 1 / ends[1]);
  const [x0, x1] = [1 / ends[1] - pad, 1 / ends[0] + pad];
  const line = Array.from({ length: 121 }, (_, i) => {
    const x = x0 + (x1 - x0) * i / 120;
    const band = fit.band(1 / x, level);
    return { x: 1000 * x, k: band.value, ...ranges(band.confidence, band.prediction) };
  });
  const hasBand = line.every((row) => Number.isFinite(row.low) && row.predictedLow > 0);
  const points = fit.points.map((point) => {
    const [a, b] = point.rateConstant.interval(level);
    const known = Number.isFinite(point.rateConstant.standardError);
    const k = point.rateConstant.value;
    return {
      x: 1000 / point.temperature,
      k,
      line: fit.band(point.temperature, level).value,
      low: known && a > 0 ? a : k,
      high: known ? b : k,
    };
  });
  const all = [
    ...points.flatMap((p) => [p.low, p.high]),
    ...line.flatMap((l) => hasBand ? [l.predictedLow, l.predictedHigh] : [l.k]),
  ];
  const [yLow, yHigh] = [Math.min(...all) / 1.15, Math.max(...all) * 1.15];
  const ticks = powerTicks(yLow, yHigh);
  const unit = fit.rateConstantAtReference.unit;
  const panel = drawPanel({
    width,
    height: Math.round(width * 0.62),
    marginLeft: 76,
    marginBottom: 46,
    marginTop: 42,
    marginRight: 14,
    x: { domain: [1000 * x0, 1000 * x1] },
    y: { type: "log", domain: [yLow, yHigh] },
    marks: [
      ...outside(x0, x1, low, high, yLow, yHigh),
      ...(hasBand
        ? [
          Plot.areaY(line, { x: "x", y1: "low", y2: "high", fill: COLOURS[0], fillOpacity: 0.22 }),
          ...(["predictedLow", "predictedHigh"] as const).map((y) =>
            Plot.line(line, { x: "x", y, stroke: COLOURS[0], strokeDasharray: "4,3" })
          ),
        ]
        : []),
      ...frameMarks({
        x: { title: "1000 K / T" },
        y: { title: "k", unit },
        yTicks: ticks,
        yTickFormat: powerTick,
        yLabelOffset: 62,
      }),
      celsiusAxis(x0, x1),
      Plot.text(["temperature / °C"], { frameAnchor: "top", dy: -38, fill: INK }),
      Plot.line(line, { x: "x", y: "k", stroke: COLOURS[0], strokeWidth: 1.6 }),
      Plot.ruleX(points, { x: "x", y1: "low", y2: "high", stroke: INK }),
      Plot.dot(points, { x: "x", y: "k", r: 3.5, stroke: INK, fill: "white" }),
    ],
  });
  const deviations = deviationPanel(line, points, { x0, x1, low, high, width, hasBand });
  const legend = drawLegend([
    { label: `rate constant, ${percent} interval`, colour: INK, symbol: "circle" },
    { label: "Arrhenius line", colour: COLOURS[0], dash: "none" },
    ...(hasBand
      ? [
        { label: `${percent} confidence band`, colour: COLOURS[0], shaded: true },
        { label: `${percent} prediction band`, colour: COLOURS[0], dash: "4,3" },
      ]
      : []),
  ], width);
  const placed: PlacedPanel[] = [
    { panel: legend, x: 30, y: 4 },
    { panel, x: 0, y: legend.height + 4 },
    { panel: deviations, x: 0, y: legend.height + 4 + panel.height },
  ];
  return composeSvg(placed, alt);
}

interface LineRow {
  readonly x: number;
  readonly k: number;
  readonly low: number;
  readonly high: number;
  readonly predictedLow: number;
  readonly predictedHigh: number;
}

/** A strip with the deviations from the line in %, in which the bands can be seen. */
function deviationPanel(
  line: readonly LineRow[],
  points: readonly { x: number; k: number; low: number; high: number; line: number }[],
  view: { x0: number; x1: number; low: number; high: number; width: number; hasBand: boolean },
): Panel {
  const percent = (k: number, reference: number) => 100 * (k / reference - 1);
  const rows = line.map((row) => ({
    x: row.x,
    low: percent(row.low, row.k),
    high: percent(row.high, row.k),
    predictedLow: percent(row.predictedLow, row.k),
    predictedHigh: percent(row.predictedHigh, row.k),
  }));
  const marks = points.map((p) => ({
    x: p.x,
    y: percent(p.k, p.line),
    low: percent(p.low, p.line),
    high: percent(p.high, p.line),
  }));
  const greatest = 1.12 * Math.max(
    ...marks.flatMap((m) => [Math.abs(m.low), Math.abs(m.high)]),
    ...(view.hasBand ? rows.flatMap((r) => [Math.abs(r.predictedLow), r.predictedHigh]) : []),
  );
  // Points that lie on the line to rounding are drawn on it.
  const bound = greatest > 1e-6 ? greatest : 1;
  return drawPanel({
    width: view.width,
    height: 170,
    marginLeft: 76,
    marginBottom: 46,
    marginTop: 8,
    marginRight: 14,
    x: { domain: [1000 * view.x0, 1000 * view.x1] },
    y: { domain: [-bound, bound] },
    marks: [
      ...outside(view.x0, view.x1, view.low, view.high, -bound, bound, false),
      ...(view.hasBand
        ? [
          Plot.areaY(rows, { x: "x", y1: "low", y2: "high", fill: COLOURS[0], fillOpacity: 0.22 }),
          ...(["predictedLow", "predictedHigh"] as const).map((y) =>
            Plot.line(rows, { x: "x", y, stroke: COLOURS[0], strokeDasharray: "4,3" })
          ),
        ]
        : []),
      ...frameMarks({
        x: { title: "1000 K / T" },
        y: { title: "deviation", unit: "%" },
        yTickCount: 4,
        yLabelOffset: 62,
      }),
      Plot.ruleY([0], { stroke: COLOURS[0], strokeWidth: 1.6 }),
      Plot.ruleX(marks, { x: "x", y1: "low", y2: "high", stroke: INK }),
      Plot.dot(marks, { x: "x", y: "y", r: 3.5, stroke: INK, fill: "white" }),
    ],
  });
}

function ranges(
  confidence: readonly [number, number],
  prediction: readonly [number, number],
): { low: number; high: number; predictedLow: number; predictedHigh: number } {
  return {
    low: confidence[0],
    high: confidence[1],
    predictedLow: prediction[0],
    predictedHigh: prediction[1],
  };
}

/** Grey over what lies outside the tested temperatures, with the words. */
function outside(
  x0: number,
  x1: number,
  low: number,
  high: number,
  y0: number,
  y1: number,
  words = true,
): Plot.Markish[] {
  const margin = 0.06 * (1 / low - 1 / high);
  const zones = [
    { from: x0, to: 1 / high - margin, edge: "right" },
    { from: 1 / low + margin, to: x1, edge: "left" },
  ].filter((zone) => zone.to - zone.from > 0.06 * (x1 - x0));
  return [
    Plot.rect(zones, {
      x1: (zone: { from: number }) => 1000 * zone.from,
      x2: (zone: { to: number }) => 1000 * zone.to,
      y1: () => y0,
      y2: () => y1,
      fill: "#808080",
      fillOpacity: 0.14,
    }),
    Plot.text(words ? zones : [], {
      x: (zone: { from: number; to: number }) => 500 * (zone.from + zone.to),
      y: () => y1,
      dy: 12,
      text: () => "not tested",
      fill: INK,
      fontStyle: "italic",
    }),
  ];
}

/** Round temperatures in °C along the top. */
function celsiusAxis(x0: number, x1: number): Plot.Markish {
  const [low, high] = [1 / x1 - ZERO_CELSIUS, 1 / x0 - ZERO_CELSIUS];
  const step = [1, 2, 5, 10, 20, 50, 100, 200, 500].find((s) => (high - low) / s <= 9) ?? 1000;
  const ticks: number[] = [];
  for (let t = Math.ceil(low / step) * step; t <= high; t += step) ticks.push(t);
  return Plot.axisX(ticks.map((t) => 1000 / (t + ZERO_CELSIUS)), {
    anchor: "top",
    label: null,
    tickFormat: (x: number) => String(Math.round(1000 / x - ZERO_CELSIUS)).replace("-", "−"),
    color: INK,
  });
}
