import type { RateLawFit } from "../rate_law/rate_law_fit.ts";
import { axisUnit } from "./axis.ts";
import { Figure } from "./figure.ts";

/** The drawing, with the plotting library; no literal in the import, so that neither is looked at before a
 * picture is asked for. */
const DRAWING: string = "./draw_residuals.ts";

/** Draws the residuals of a rate-law fit against time as a strip: what the law leaves of each reading.
 *
 * @param fit the fit */
export function plotResiduals(fit: RateLawFit): Figure {
  const last = Math.max(...fit.runs.flatMap((run) => Array.from(run.signal.times)));
  const time = axisUnit("s", last);
  const alt = `Residuals of the fit of order ${fit.order.value} against time in ${time.unit}: ` +
    fit.residualCheck.verdict;
  return new Figure(async () => {
    const { drawResiduals }: typeof import("./draw_residuals.ts") = await import(DRAWING);
    return drawResiduals(fit, time, alt);
  }, alt);
}
