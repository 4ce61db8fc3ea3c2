import { readRuns } from "../run/read_runs.ts";
import { fitArrhenius } from "../temperature/fit_arrhenius.ts";
import { allowRead, type Command, orderOf, textOf, textsOf, UsageError } from "./command.ts";
import { READING_OPTIONS, readingOptions } from "./reading_options.ts";

/** `arrhenius FILE …`: activation energy from runs at several temperatures, all fitted at once. */
export const arrhenius: Command = {
  name: "arrhenius",
  summary: "Fit activation energy and pre-exponential factor to runs at several temperatures",
  operands: "FILE …",
  options: {
    order: { type: "string", value: "N", help: "order of the rate law; 1 if left out" },
    "end-value": {
      type: "string",
      value: "VALUE",
      help: "end value of the signal with its unit, or free",
    },
    at: {
      type: "string",
      value: "TEMPERATURE",
      multiple: true,
      help: `rate constant at this temperature, such as "25 °C"; may be repeated`,
    },
    energy: {
      type: "string",
      value: "UNIT",
      help: "unit of the activation energy, such as kcal/mol",
    },
    ...READING_OPTIONS,
  },
  permissions: (operands) => operands.length > 0 ? [allowRead(operands)] : [],
  run: async (operands, values) => {
    if (operands.length === 0) {
      throw new UsageError("Cannot fit an activation energy to no file: name a file of runs");
    }
    const order = orderOf(values) ?? 1;
    if (order === "free") {
      throw new UsageError(
        `Cannot share a free order between temperatures: find it with rate-law, then give --order N`,
      );
    }
    const runs = await readRuns([...operands], readingOptions(values));
    const fit = fitArrhenius(runs, {
      order,
      species: textOf(values, "species"),
      endValue: textOf(values, "end-value"),
    });
    const predictions = textsOf(values, "at").map((at) => ({ at, k: fit.rateConstantAt(at) }));
    const unit = textOf(values, "energy");
    const energy = unit ? [`activation energy: ${fit.activationEnergy.in(unit)}`] : [];
    const lines = predictions.flatMap(({ at, k }) => [
      `k at ${at}: ${k}`,
      ...k.cautions.filter((c) => c.code === "extrapolation").map((c) => `  ${c.message}`),
    ]);
    return {
      text: [`${runs}\n`, `${fit}`, ...energy, ...lines].join("\n"),
      data: {
        runs: runs.toJSON(),
        arrhenius: fit.toJSON(),
        predictions: predictions.map(({ at, k }) => ({ at, rateConstant: k.toJSON() })),
      },
    };
  },
};
