import * as Plot from "@observablehq/plot";
import type { RateLawFit } from "../rate_law/rate_law_fit.ts";
import { type AxisUnit, axisUnit } from "./axis.ts";
import { composeSvg, drawPanel } from "./draw.ts";
import { frameMarks } from "./frame.ts";
import { COLOURS, cycle, INK, SYMBOLS } from "./style.ts";

/** Draws the residuals of a fit against time.
 *
 * @param fit the fit @param time unit of the time axis @param alt what is seen */
export function drawResiduals(fit: RateLawFit, time: AxisUnit, alt: string): string {
  const unit = fit.runs[0].signal.unit;
  const greatest = Math.max(...fit.runs.flatMap((run) => Array.from(run.residuals, Math.abs)));
  const value = axisUnit(unit, greatest);
  const bound = value.from(greatest) * 1.15 || 1;
  const panel = drawPanel({
    width: 640,
    height: 170,
    marginLeft: 84,
    marginBottom: 46,
    marginTop: 8,
    marginRight: 14,
    x: { insetLeft: 8, insetRight: 8 },
    y: { domain: [-bound, bound] },
    symbol: { type: "identity" },
    marks: [
      ...frameMarks({
        x: { title: "time", unit: time.unit },
        y: { title: "residual", unit: value.unit },
        yTickCount: 4,
        yLabelOffset: 68,
      }),
      Plot.ruleY([0], { stroke: INK }),
      ...fit.runs.map((run, i) => {
        const points = Array.from(run.residuals, (y, j) => ({
          x: time.from(run.signal.times[j]),
          y: value.from(y),
        }));
        const colour = cycle(COLOURS, i);
        return [
          Plot.ruleX(points, { x: "x", y1: 0, y2: "y", stroke: colour, strokeOpacity: 0.5 }),
          Plot.dot(points, {
            x: "x",
            y: "y",
            stroke: colour,
            fill: "white",
            r: 3,
            symbol: cycle(SYMBOLS, i) as Plot.SymbolType,
          }),
        ];
      }),
    ],
  });
  return composeSvg([{ panel, x: 0, y: 0 }], alt);
}
