import { basename } from "node:path";
import { plotTrajectory } from "../figure/plot_trajectory.ts";
import { StochasticTrajectory } from "../simulation/stochastic_trajectory.ts";
import type { Trajectory } from "../simulation/trajectory.ts";
import { allowRead, allowWrite, type Command, LIBRARY, textOf, UsageError } from "./command.ts";
import { simulateFile } from "./simulation_file.ts";

/** `simulate FILE`: concentrations in time of a mechanism that a TOML file describes. */
export const simulate: Command = {
  name: "simulate",
  summary: "Follow the concentrations of a mechanism in time, as a TOML file describes it",
  operands: "FILE",
  options: {
    csv: { type: "string", value: "FILE", help: "write the concentrations as CSV" },
    svg: { type: "string", value: "FILE", help: "write a figure" },
  },
  permissions: (operands, values) => {
    const written = ["csv", "svg"].flatMap((name) => textOf(values, name) ?? []);
    return [
      allowRead([...operands, LIBRARY]),
      ...(written.length > 0 ? [allowWrite(written)] : []),
    ];
  },
  run: async (operands, values) => {
    if (operands.length !== 1) {
      throw new UsageError(`Cannot simulate ${operands.length} files: name one TOML file`);
    }
    const [file] = operands;
    const trajectory = await simulateFile(await Deno.readTextFile(file), basename(file));
    const csv = textOf(values, "csv");
    const svg = textOf(values, "svg");
    if (csv !== undefined) await Deno.writeTextFile(csv, table(trajectory));
    if (svg !== undefined) await Deno.writeTextFile(svg, await plotTrajectory(trajectory).svg());
    return { text: String(trajectory), data: series(trajectory) };
  },
};

/** Names, unit and values of all species. */
function columns(trajectory: Trajectory | StochasticTrajectory): {
  names: readonly string[];
  unit: string;
  of: (name: string) => Float64Array;
} {
  return trajectory instanceof StochasticTrajectory
    ? { names: trajectory.species, unit: "1", of: (name) => trajectory.count(name) }
    : {
      names: trajectory.mechanism.species,
      unit: "mol/L",
      of: (name) => trajectory.concentration(name),
    };
}

/** CSV that `readRuns` reads back as one run. */
function table(trajectory: Trajectory | StochasticTrajectory): string {
  const { names, unit, of } = columns(trajectory);
  const all = names.map(of);
  const cell = (text: string) => /[",\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
  const rows = [["time [s]", ...names.map((name) => cell(`${name} [${unit}]`))].join(",")];
  trajectory.times.forEach((time, i) =>
    rows.push([time, ...all.map((values) => values[i])].join(","))
  );
  return rows.join("\n") + "\n";
}

function series(trajectory: Trajectory | StochasticTrajectory): Record<string, unknown> {
  const { names, unit, of } = columns(trajectory);
  return {
    ...trajectory.toJSON(),
    times: { unit: "s", values: Array.from(trajectory.times) },
    series: Object.fromEntries(names.map((name) => [name, { unit, values: Array.from(of(name)) }])),
  };
}
