import * as Plot from "@observablehq/plot";
import { axisTitle, linearTick } from "./axis.ts";
import { FAINT, INK } from "./style.ts";

/** Axes and frame that all figures share: titles with units, ticks outside, a faint grid. */
export function frameMarks(options: {
  x: { title: string; unit?: string };
  y: { title: string; unit?: string };
  xTicks?: readonly number[];
  yTicks?: readonly number[];
  xTickFormat?: (value: number) => string;
  yTickFormat?: (value: number) => string;
  yTickCount?: number;
  yLabelOffset?: number;
}): Plot.Markish[] {
  const x = axisTitle(options.x.title, options.x.unit ?? "1");
  const y = axisTitle(options.y.title, options.y.unit ?? "1");
  return [
    Plot.gridX({ stroke: FAINT, strokeOpacity: 1, ticks: options.xTicks as number[] ?? 6 }),
    Plot.gridY({
      stroke: FAINT,
      strokeOpacity: 1,
      ticks: (options.yTicks as number[]) ?? options.yTickCount ?? 5,
    }),
    Plot.axisX({
      label: x,
      labelAnchor: "center",
      labelArrow: "none",
      labelOffset: 36,
      ticks: options.xTicks as number[] ?? 6,
      tickFormat: (value: number) => (options.xTickFormat ?? linearTick)(value),
      color: INK,
    }),
    Plot.axisY({
      label: y,
      labelAnchor: "center",
      labelArrow: "none",
      labelOffset: options.yLabelOffset ?? 50,
      ticks: (options.yTicks as number[]) ?? options.yTickCount ?? 5,
      tickFormat: (value: number) => (options.yTickFormat ?? linearTick)(value),
      color: INK,
    }),
    Plot.frame({ stroke: INK }),
  ];
}
