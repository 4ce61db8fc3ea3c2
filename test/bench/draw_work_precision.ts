/** Draws the results of the benchmark, one panel a problem.
 *
 *     deno run -A test/bench/draw_work_precision.ts RESULTS.json [RESULTS.json …] FIGURE.svg */
import * as Plot from "@observablehq/plot";
import { composeSvg, drawPanel, type PlacedPanel } from "../../lib/figure/draw.ts";
import { frameMarks } from "../../lib/figure/frame.ts";
import { COLOURS, INK, SYMBOLS } from "../../lib/figure/style.ts";
import { superscript } from "../../lib/quantity/number_format.ts";
import { bestRuns, type WorkPoint } from "./work_precision.ts";

interface Row {
  readonly problem: string;
  readonly species: number;
  readonly own: readonly WorkPoint[];
  readonly native: readonly (WorkPoint & { readonly solver: string })[];
}

const WIDTH = 300;
const HEIGHT = 230;
const COLUMNS = 3;

/** Work–precision diagrams: time against delivered error, tighter to the right.
 *
 * @param rows one for each problem
 * @returns a standalone SVG document */
export function drawWorkPrecision(rows: readonly Row[]): string {
  const panels = rows.map((row, i): PlacedPanel => ({
    panel: panel(row),
    x: (i % COLUMNS) * WIDTH,
    y: 30 + Math.floor(i / COLUMNS) * HEIGHT,
  }));
  const key = drawPanel({
    width: COLUMNS * WIDTH,
    height: 30,
    marginLeft: 0,
    marginRight: 0,
    marginTop: 0,
    marginBottom: 0,
    axis: null,
    x: { domain: [0, COLUMNS * WIDTH], range: [0, COLUMNS * WIDTH] },
    y: { domain: [0, 30], range: [30, 0] },
    marks: ["Ratebook", "CVODE, compiled C", "SciPy, best of three methods"].flatMap((name, s) => [
      Plot.dot([{ x: 60 + 260 * s, y: 15 }], { x: "x", y: "y", ...mark(s) }),
      Plot.text([{ x: 72 + 260 * s, y: 15 }], {
        x: "x",
        y: "y",
        text: [name],
        textAnchor: "start",
        fill: INK,
      }),
    ]),
  });
  return composeSvg(
    [{ panel: key, x: 0, y: 0 }, ...panels],
    `Time against delivered error of ${rows.length} problems, for Ratebook, CVODE and SciPy`,
  );
}

function mark(series: number): Plot.DotOptions {
  return {
    stroke: COLOURS[series],
    fill: series === 0 ? COLOURS[series] : "#fff",
    symbol: SYMBOLS[series] as Plot.DotOptions["symbol"],
    r: 3.5,
  };
}

function panel(row: Row): PlacedPanel["panel"] {
  const series = [
    row.own,
    row.native.filter((run) => run.solver === "cvode"),
    row.native.filter((run) => run.solver.startsWith("scipy")),
  ].map(bestRuns);
  const all = series.flat();
  const decades = (values: readonly number[]) => {
    const low = Math.floor(Math.log10(Math.min(...values)));
    const high = Math.ceil(Math.log10(Math.max(...values)));
    return Array.from({ length: high - low + 1 }, (_, i) => Math.pow(10, low + i));
  };
  const errors = decades(all.map((run) => run.error));
  const times = decades(all.map((run) => run.ms));
  const every = Math.ceil(errors.length / 6);
  const power = (value: number) => `10${superscript(Math.round(Math.log10(value)))}`;
  return drawPanel({
    width: WIDTH,
    height: HEIGHT,
    marginLeft: 60,
    marginRight: 22,
    marginTop: 24,
    marginBottom: 46,
    x: { type: "log", domain: [errors[errors.length - 1], errors[0]], label: null },
    y: { type: "log", domain: [times[0], times[times.length - 1]], label: null },
    marks: [
      frameMarks({
        x: { title: "delivered error" },
        y: { title: "time", unit: "ms" },
        xTicks: errors.filter((_, i) => i % every === 0),
        yTicks: times,
        xTickFormat: power,
        yTickFormat: power,
        yLabelOffset: 44,
      }),
      ...series.flatMap((runs, s) => [
        Plot.line(runs, { x: "error", y: "ms", stroke: COLOURS[s], strokeWidth: 1.5 }),
        Plot.dot(runs, { x: "error", y: "ms", ...mark(s) }),
      ]),
      Plot.text([`${row.problem}: ${row.species} species`], {
        frameAnchor: "top",
        dy: -16,
        fontWeight: "bold",
        fill: INK,
      }),
    ],
  });
}

if (import.meta.main) {
  const figure = Deno.args[Deno.args.length - 1];
  const rows = Deno.args.slice(0, -1).flatMap((file) =>
    JSON.parse(Deno.readTextFileSync(file)).report
  );
  await Deno.writeTextFile(figure, drawWorkPrecision(rows));
}
