import * as option from "../quantity/options.ts";
import { StochasticTrajectory } from "../simulation/stochastic_trajectory.ts";
import type { Trajectory } from "../simulation/trajectory.ts";
import { axisUnit } from "./axis.ts";
import { Figure } from "./figure.ts";

/** The drawing, with the plotting library; no literal in the import, so that neither is looked at before a
 * picture is asked for. */
const DRAWING: string = "./draw_trajectory.ts";

/** How {@link plotTrajectory} draws. */
export interface PlotTrajectoryOptions {
  /** Species to draw; the first seven where left out. */
  species?: string[];
  /** Axis of time.
   * @default {"linear"} */
  time?: "linear" | "logarithmic";
  /** Width of the figure, px.
   * @default {640} */
  width?: number;
}

/** Species that a figure shows without being asked. */
const USUAL_SPECIES = 7;

/** Draws concentrations (or copy numbers, as steps) of species against time.
 *
 * @param trajectory a simulation
 * @param options species, axis of time, width
 * @throws {RangeError} if a species does not exist or there are fewer than two times to draw */
export function plotTrajectory(
  trajectory: Trajectory | StochasticTrajectory,
  options: PlotTrajectoryOptions = {},
): Figure {
  const read = option.readOptions("plotTrajectory", options, {
    species: option.list(option.text),
    time: option.oneOf("linear", "logarithmic"),
    width: option.number({ min: 200, max: 4000 }),
  });
  const { width = 640 } = read;
  const stepped = trajectory instanceof StochasticTrajectory;
  const all = stepped ? trajectory.species : trajectory.mechanism.species;
  const names = read.species ?? all.slice(0, USUAL_SPECIES);
  const logarithmic = read.time === "logarithmic";
  const { times } = trajectory;
  if (times.filter((t) => !logarithmic || t > 0).length < 2) {
    throw new RangeError(
      `Cannot draw a trajectory with ${times.length} output times${
        logarithmic ? " on a logarithmic axis, where only those above 0 count" : ""
      }: give at least 2`,
    );
  }
  const series = names.map((name) => ({
    name,
    times,
    values: stepped ? trajectory.count(name) : trajectory.concentration(name),
  }));
  const greatest = Math.max(...series.flatMap((s) => Array.from(s.values, Math.abs)));
  const time = axisUnit("s", times[times.length - 1]);
  const value = axisUnit(stepped ? "1" : "mol/L", greatest);
  const title = stepped ? "copy number" : "concentration";
  const left = all.length - names.length;
  const alt = `${title} of ${names.join(", ")} against time in ${time.unit}` +
    (logarithmic ? " (logarithmic)" : "") +
    (left > 0 ? `; ${left} other species are not drawn` : "") +
    (trajectory.finished ? "" : `; unfinished: ${trajectory.reason}`);
  return new Figure(async () => {
    const { drawTrajectory }: typeof import("./draw_trajectory.ts") = await import(DRAWING);
    return drawTrajectory({ series, time, title, value, logarithmic, stepped, width, alt });
  }, alt);
}
