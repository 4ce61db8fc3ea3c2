import * as Plot from "@observablehq/plot";
import { formatNumber } from "../quantity/number_format.ts";
import * as option from "../quantity/options.ts";
import { RateLawFit } from "../rate_law/rate_law_fit.ts";
import { listRuns, type Runs } from "../rate_law/fit_rate_law.ts";
import { axisUnit } from "./axis.ts";
import { composeSvg, drawPanel, type PlacedPanel } from "./draw.ts";
import { Figure } from "./figure.ts";
import { frameMarks } from "./frame.ts";
import { drawLegend, type LegendEntry } from "./legend.ts";
import { COLOURS, cycle, DASHES, SYMBOLS } from "./style.ts";

/** How {@link plotRuns} draws. */
export interface PlotRunsOptions {
  /** Name of the species or signal; needed where the runs have several. */
  species?: string;
  /** Width of the figure, px.
   * @default {640} */
  width?: number;
}

interface Series {
  readonly name: string;
  readonly points: readonly { x: number; y: number }[];
  readonly curve?: (x: number) => number;
}

/** Draws runs against time: readings as points, and the fitted law as a line through them where a
 * fit is given instead of runs.
 *
 * @param runs runs, or a fit (or fits) of a rate law
 * @param options signal and width
 * @throws {RangeError} if there is nothing to draw, or the signals have different units */
export function plotRuns(
  runs: Runs | RateLawFit | readonly RateLawFit[],
  options: PlotRunsOptions = {},
): Figure {
  const { species, width = 640 } = option.readOptions("plotRuns", options, {
    species: option.text,
    width: option.number({ min: 200, max: 4000 }),
  });
  const fits = asFits(runs);
  const { raw, name, unit } = fits ? seriesOfFits(fits) : seriesOfRuns(runs as Runs, species);
  const times = raw.flatMap((series) => series.points.map((point) => point.x));
  const values = raw.flatMap((series) => series.points.map((point) => point.y));
  const time = axisUnit("s", Math.max(...times));
  const value = axisUnit(unit, Math.max(...values.map(Math.abs)));
  const isConcentration = unit === "mol/L";
  const styled = raw.map((series, i) => ({
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
        y: { title: isConcentration ? `[${name}]` : name, unit: value.unit },
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
  const legend = raw.length > 1
    ? drawLegend(legendEntries(styled, Boolean(fits)), width)
    : undefined;
  const placed: PlacedPanel[] = legend
    ? [{ panel: legend, x: 0, y: 4 }, { panel, x: 0, y: legend.height + 4 }]
    : [{ panel, x: 0, y: 0 }];
  const alt =
    `${name} against time in ${time.unit} for ${raw.length} run${raw.length > 1 ? "s" : ""}` +
    ` (${raw.map((series) => series.name).join("; ")})` +
    (fits ? `, readings as points and the fitted rate law as a line` : `, readings as points`);
  return new Figure(composeSvg(placed, alt), alt);
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

function asFits(runs: unknown): RateLawFit[] | undefined {
  if (runs instanceof RateLawFit) return [runs];
  if (Array.isArray(runs) && runs.length > 0 && runs.every((item) => item instanceof RateLawFit)) {
    return runs;
  }
  return undefined;
}

function runName(id: string, temperature: number | undefined): string {
  return temperature === undefined ? id : `${id}, ${formatNumber(temperature, 5)} K`;
}

function seriesOfFits(
  fits: readonly RateLawFit[],
): { raw: Series[]; name: string; unit: string } {
  const raw = fits.flatMap((fit) =>
    fit.runs.map((run): Series => ({
      name: runName(run.run, run.temperature),
      points: Array.from(run.signal.times, (x, i) => ({ x, y: run.signal.values[i] })),
      curve: run.at,
    }))
  );
  return { raw, name: fits[0].species, unit: oneUnit(fits.map((fit) => fit.runs[0].signal.unit)) };
}

function seriesOfRuns(
  runs: Runs,
  species: string | undefined,
): { raw: Series[]; name: string; unit: string } {
  const list = listRuns(runs);
  const signals = list.map((run) => run.signal(species));
  const raw = list.map((run, r): Series => ({
    name: runName(run.id, run.temperature),
    points: Array.from(run.times, (x, i) => ({ x, y: signals[r].values[i] }))
      .filter((point) => Number.isFinite(point.y)),
  }));
  return { raw, name: signals[0].name, unit: oneUnit(signals.map((signal) => signal.unit)) };
}

function oneUnit(units: readonly string[]): string {
  const distinct = [...new Set(units)];
  if (distinct.length === 1) return distinct[0];
  throw new RangeError(
    `Cannot draw signals of different units (${distinct.join(", ")}) on one axis: draw them apart`,
  );
}
