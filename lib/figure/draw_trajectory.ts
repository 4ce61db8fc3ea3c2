import * as Plot from "@observablehq/plot";
import { type AxisUnit, linearTick, powerTick, powerTicks } from "./axis.ts";
import { composeSvg, drawPanel } from "./draw.ts";
import { frameMarks } from "./frame.ts";
import { drawLegend } from "./legend.ts";
import { COLOURS, cycle, DASHES } from "./style.ts";

/** What a figure of concentrations in time shows. */
export interface TrajectoryView {
  /** One a species, canonical units. */
  readonly series: readonly {
    readonly name: string;
    readonly times: Float64Array;
    readonly values: Float64Array;
  }[];
  /** Unit of time. */
  readonly time: AxisUnit;
  /** Title of the vertical axis, without unit. */
  readonly title: string;
  /** Unit of the vertical axis. */
  readonly value: AxisUnit;
  /** Whether time is drawn logarithmically. */
  readonly logarithmic: boolean;
  /** Whether the lines are steps, as copy numbers are. */
  readonly stepped: boolean;
  /** Width of the figure, px. */
  readonly width: number;
  /** What is seen. */
  readonly alt: string;
}

/** Draws concentrations (or copy numbers) of species against time. */
export function drawTrajectory(view: TrajectoryView): string {
  const { time, value, width, logarithmic } = view;
  const styled = view.series.map((series, i) => ({
    name: series.name,
    colour: cycle(COLOURS, i),
    dash: cycle(DASHES, i),
    points: Array.from(
      series.times,
      (t, j) => ({ x: time.from(t), y: value.from(series.values[j]) }),
    )
      .filter((point) => !logarithmic || point.x > 0),
  }));
  const times = styled.flatMap((series) => series.points.map((point) => point.x));
  const [first, last] = [Math.min(...times), Math.max(...times)];
  const ticks = logarithmic ? powerTicks(first, last) : undefined;
  const values = styled.flatMap((series) => series.points.map((point) => point.y));
  const panel = drawPanel({
    width,
    height: Math.round(width * 0.58),
    marginLeft: 72,
    marginBottom: 46,
    marginTop: 8,
    marginRight: 14,
    x: logarithmic ? { type: "log", domain: [first, last] } : { insetLeft: 4, insetRight: 4 },
    y: { nice: true, zero: Math.min(...values) >= 0, insetTop: 8 },
    marks: [
      ...frameMarks({
        x: { title: "time", unit: time.unit },
        y: { title: view.title, unit: value.unit },
        yLabelOffset: 56,
        xTicks: ticks,
        xTickFormat: logarithmic ? powerTick : linearTick,
      }),
      ...styled.map((series) =>
        Plot.line(series.points, {
          x: "x",
          y: "y",
          stroke: series.colour,
          strokeWidth: 1.8,
          strokeDasharray: series.dash,
          curve: view.stepped ? "step-after" : "linear",
        })
      ),
    ],
  });
  const legend = drawLegend(
    styled.map(({ name, colour, dash }) => ({ label: name, colour, dash })),
    width,
  );
  return composeSvg([
    { panel: legend, x: 0, y: 4 },
    { panel, x: 0, y: legend.height + 4 },
  ], view.alt);
}
