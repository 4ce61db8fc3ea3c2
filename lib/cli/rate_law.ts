import type { Result } from "../quantity/result.ts";
import { compareRateLaws } from "../rate_law/compare_rate_laws.ts";
import { fitRateLaw } from "../rate_law/fit_rate_law.ts";
import { readRuns } from "../run/read_runs.ts";
import type { RunSet } from "../run/run_set.ts";
import { allowRead, type Command, orderOf, textOf, textsOf, UsageError } from "./command.ts";
import { READING_OPTIONS, readingOptions } from "./reading_options.ts";

/** `rate-law FILE …`: the order and rate constant of runs, temperature by temperature. */
export const rateLaw: Command = {
  name: "rate-law",
  summary: "Find the order and rate constant of runs, for each temperature",
  operands: "FILE …",
  options: {
    order: {
      type: "string",
      value: "N",
      help: "fit this order only, or free; compares 0, 1, 2 if left out",
    },
    "end-value": {
      type: "string",
      value: "VALUE",
      help:
        `end value of the signal with its unit, or free; default: free for raw signals, 0 for concentrations`,
    },
    run: { type: "string", value: "ID", multiple: true, help: "only this run; may be repeated" },
    each: {
      type: "boolean",
      help: "each run by itself, not one rate constant for all of a temperature",
    },
    ...READING_OPTIONS,
  },
  permissions: (operands) => operands.length > 0 ? [allowRead(operands)] : [],
  run: async (operands, values) => {
    if (operands.length === 0) {
      throw new UsageError("Cannot find a rate law in no file: name a file of runs");
    }
    const all = await readRuns([...operands], readingOptions(values));
    const wanted = textsOf(values, "run");
    wanted.forEach((id) => all.find(id));
    const runs = wanted.length > 0 ? all.filter((run) => wanted.includes(run.id)) : all;
    const order = orderOf(values);
    const options = { species: textOf(values, "species"), endValue: textOf(values, "end-value") };
    const groups = values.each ? [...runs].map((run) => [run]) : byTemperature(runs);
    const results: Result[] = groups.map((group) =>
      order === undefined
        ? compareRateLaws(group, options)
        : fitRateLaw(group, { ...options, order })
    );
    return {
      text: [runs, ...results].map(String).join("\n\n"),
      data: { runs: runs.toJSON(), rateLaws: results.map((result) => result.toJSON()) },
    };
  },
};

/** Runs that share a temperature; those that have none count as sharing one. */
function byTemperature(runs: RunSet): RunSet[] {
  return [
    ...runs.groupBy((run) => run.temperature === undefined ? "" : run.temperature.toFixed(2))
      .values(),
  ];
}
