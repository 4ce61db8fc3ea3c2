import * as Plot from "@observablehq/plot";
import type { Linearization } from "../rate_law/linearize.ts";
import { axisUnit } from "./axis.ts";
import { composeSvg, drawPanel, type Panel } from "./draw.ts";
import { frameMarks } from "./frame.ts";
import { COLOURS, INK } from "./style.ts";

const PANEL_WIDTH = 300;
const PANEL_HEIGHT = 270;

/** Draws linearizations side by side.
 *
 * @param lines the linearizations @param alt what is seen */
export function drawLinearizations(lines: readonly Linearization[], alt: string): string {
  return composeSvg(
    lines.map((line, i) => ({ panel: drawLine(line), x: i * PANEL_WIDTH, y: 0 })),
    alt,
  );
}

function drawLine(line: Linearization): Panel {
  const last = line.times[line.times.length - 1];
  const time = axisUnit("s", last);
  const points = Array.from(line.times, (t, i) => ({
    x: time.from(t),
    y: line.transformed[i],
    // Area in proportion to weight, with a least size at which a point can still be seen.
    r: 1 + 3 * Math.sqrt(line.weights[i]),
  }));
  const ends = [0, last].map((t) => ({ x: time.from(t), y: line.at(t) }));
  return drawPanel({
    width: PANEL_WIDTH,
    height: PANEL_HEIGHT,
    marginLeft: 70,
    marginBottom: 46,
    marginTop: 30,
    marginRight: 10,
    x: { insetLeft: 8, insetRight: 8 },
    y: { nice: true, insetTop: 4, insetBottom: 4 },
    r: { type: "identity" },
    marks: [
      ...frameMarks({
        x: { title: "time", unit: time.unit },
        y: { title: line.axis },
        yLabelOffset: 56,
      }),
      Plot.line(ends, { x: "x", y: "y", stroke: COLOURS[1], strokeWidth: 1.5 }),
      Plot.dot(points, { x: "x", y: "y", r: "r", stroke: COLOURS[0], fill: "white" }),
      Plot.text([`order ${line.order}`], {
        frameAnchor: "top",
        dy: -20,
        fontWeight: "bold",
        fill: INK,
      }),
    ],
  });
}
