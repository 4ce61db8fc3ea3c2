import type { Figure } from "../../lib/figure/figure.ts";
import { plotArrhenius } from "../../lib/figure/plot_arrhenius.ts";
import { plotLinearizations } from "../../lib/figure/plot_linearizations.ts";
import { plotResiduals } from "../../lib/figure/plot_residuals.ts";
import { plotRuns } from "../../lib/figure/plot_runs.ts";
import { fitRateLaw } from "../../lib/rate_law/fit_rate_law.ts";
import { linearize } from "../../lib/rate_law/linearize.ts";
import { readRuns } from "../../lib/run/read_runs.ts";
import { fitArrhenius } from "../../lib/temperature/fit_arrhenius.ts";

const runs = await readRuns(new URL("../../data/e17_hydrolysis.csv", import.meta.url));
const cells = await readRuns(new URL("../../data/e17_absorbance.csv", import.meta.url));
const warm = runs.filter((run) => run.id.startsWith("60"));

/** Every kind of figure, drawn from the demo data (invented, see data/README.md); the name of a function
 * is the name of its picture. */
export const FIGURES: Readonly<Record<string, () => Figure>> = {
  runs: () => plotRuns(runs.filter((run) => run.id.startsWith("60") || run.id.startsWith("80"))),
  many_runs: () => plotRuns(runs),
  rate_law_fit: () => plotRuns(fitRateLaw(warm)),
  raw_signal_fit: () => plotRuns(fitRateLaw(cells)),
  residuals: () => plotResiduals(fitRateLaw(warm)),
  linearizations: () =>
    plotLinearizations([0, 1, 2].map((order) => linearize(runs.find("60b"), { order }))),
  arrhenius: () => plotArrhenius(fitArrhenius(runs), { to: ["20 °C"] }),
  arrhenius_without_errors: () =>
    plotArrhenius(fitArrhenius([
      { temperature: "30 °C", rateConstant: 1e-4 },
      { temperature: "60 °C", rateConstant: 1.9e-3 },
    ])),
};
