import { formatNumber } from "../quantity/number_format.ts";
import type { Linearization } from "../rate_law/linearize.ts";
import { Figure } from "./figure.ts";

/** The drawing, with the plotting library; no literal in the import, so that neither is looked at before a
 * picture is asked for. */
const DRAWING: string = "./draw_linearizations.ts";

/** Draws linearizations side by side, each with its line; the area of a point is its weight in the line.
 *
 * @param lines linearizations of one run by different orders
 * @throws {RangeError} if there are none */
export function plotLinearizations(lines: readonly Linearization[]): Figure {
  if (lines.length === 0) {
    throw new RangeError(
      `Cannot draw no linearizations: give at least one, as linearize(run) makes`,
    );
  }
  const alt = `Linearized plots of run ${lines[0].run}, side by side: ` +
    lines.map((line) =>
      `order ${line.order} (${line.axis} against time, r² ${formatNumber(line.rSquared, 5)})`
    ).join("; ") + `. Points with little weight are small.`;
  return new Figure(async () => {
    const { drawLinearizations }: typeof import("./draw_linearizations.ts") = await import(DRAWING);
    return drawLinearizations(lines, alt);
  }, alt);
}
