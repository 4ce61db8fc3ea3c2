import { formatNumber } from "../quantity/number_format.ts";
import * as option from "../quantity/options.ts";
import type { ArrheniusFit } from "../temperature/arrhenius_fit.ts";
import { Figure } from "./figure.ts";

/** The drawing, with the plotting library; no literal in the import, so that neither is looked at before a
 * picture is asked for. */
const DRAWING: string = "./draw_arrhenius.ts";

/** How {@link plotArrhenius} draws. */
export interface PlotArrheniusOptions {
  /** Temperatures to draw the line out to beyond the tested range, K or text with a unit. */
  to?: (number | string)[];
  /** Coverage of the bands.
   * @default {0.95} */
  level?: number;
  /** Width of the figure, px.
   * @default {640} */
  width?: number;
}

/** Draws rate constants (logarithmic) against 1/T with the Arrhenius line, its confidence band, the
 * prediction band, and the temperature in °C along the top; what lies outside the tested range is
 * marked.
 *
 * @param fit the fit
 * @param options range, coverage, width
 * @throws {RangeError} on a temperature at or below 0 K */
export function plotArrhenius(fit: ArrheniusFit, options: PlotArrheniusOptions = {}): Figure {
  const { to = [], level = 0.95, width = 640 } = option.readOptions("plotArrhenius", options, {
    to: option.list(option.quantity("K", { above: 0 })),
    level: option.number({ min: 0.5, max: 0.9999 }),
    width: option.number({ min: 200, max: 4000 }),
  });
  const [low, high] = fit.temperatureRange;
  const hasBand = Number.isFinite(fit.activationEnergy.standardError);
  const percent = `${formatNumber(100 * level, 3).replace(/\.0+$/, "")} %`;
  const alt = `Arrhenius plot: k against 1000 K/T for ${fit.points.length} rate constants from ` +
    `${formatNumber(low, 5)} to ${formatNumber(high, 5)} K, line with activation energy ` +
    `${fit.activationEnergy}` +
    (hasBand ? `, shaded ${percent} confidence band, dashed ${percent} prediction band` : "") +
    `; below it the deviations of the rate constants from the line in %` +
    (to.some((t) => t < low || t > high) ? `, drawn beyond the tested range (grey)` : "");
  return new Figure(async () => {
    const { drawArrhenius }: typeof import("./draw_arrhenius.ts") = await import(DRAWING);
    return drawArrhenius({ fit, to, level, percent, width, alt });
  }, alt);
}
