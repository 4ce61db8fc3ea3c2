import { formatNumber } from "../quantity/number_format.ts";
import * as option from "../quantity/options.ts";
import { RateLawFit } from "../rate_law/rate_law_fit.ts";
import { listRuns, type Runs } from "../rate_law/fit_rate_law.ts";
import { axisUnit } from "./axis.ts";
import type { Series } from "./draw_runs.ts";
import { Figure } from "./figure.ts";

/** The drawing, with the plotting library; no literal in the import, so that neither is looked at before a
 * picture is asked for. */
const DRAWING: string = "./draw_runs.ts";

/** How {@link plotRuns} draws. */
export interface PlotRunsOptions {
  /** Name of the species or signal; needed where the runs have several. */
  species?: string;
  /** Width of the figure, px.
   * @default {640} */
  width?: number;
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
  const alt =
    `${name} against time in ${time.unit} for ${raw.length} run${raw.length > 1 ? "s" : ""}` +
    ` (${raw.map((series) => series.name).join("; ")})` +
    (fits ? `, readings as points and the fitted rate law as a line` : `, readings as points`);
  return new Figure(async () => {
    const { drawRuns }: typeof import("./draw_runs.ts") = await import(DRAWING);
    const title = isConcentration ? `[${name}]` : name;
    return drawRuns({ series: raw, title, time, value, width, alt });
  }, alt);
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
