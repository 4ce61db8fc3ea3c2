import type { Figure } from "../../lib/figure/figure.ts";
import { plotArrhenius } from "../../lib/figure/plot_arrhenius.ts";
import { plotLinearizations } from "../../lib/figure/plot_linearizations.ts";
import { plotResiduals } from "../../lib/figure/plot_residuals.ts";
import { plotRuns } from "../../lib/figure/plot_runs.ts";
import { plotTrajectory } from "../../lib/figure/plot_trajectory.ts";
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { fitRateLaw } from "../../lib/rate_law/fit_rate_law.ts";
import { linearize } from "../../lib/rate_law/linearize.ts";
import { readRuns } from "../../lib/run/read_runs.ts";
import { simulate } from "../../lib/simulation/simulate.ts";
import { simulateStochastic } from "../../lib/simulation/simulate_stochastic.ts";
import { fitArrhenius } from "../../lib/temperature/fit_arrhenius.ts";

const runs = await readRuns(new URL("../../data/e17_hydrolysis.csv", import.meta.url));
const cells = await readRuns(new URL("../../data/e17_absorbance.csv", import.meta.url));
const warm = runs.filter((run) => run.id.startsWith("60"));

const CONSECUTIVE = parseMechanism("A + B <=>[k1][k-1] C\nC ->[k2] D");

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
  trajectory: () =>
    plotTrajectory(simulate(CONSECUTIVE, {
      rateConstants: { k1: 20, "k-1": 0.05, k2: 0.01 },
      initial: { A: 0.01, B: 0.015 },
      times: Array.from({ length: 121 }, (_, i) => i * 5),
    })),
  trajectory_logarithmic: () =>
    plotTrajectory(
      simulate(CONSECUTIVE, {
        rateConstants: { k1: 20, "k-1": 0.05, k2: 0.01 },
        initial: { A: 0.01, B: 0.015 },
        times: Array.from({ length: 121 }, (_, i) => 10 ** (i / 20 - 3)),
      }),
      { time: "logarithmic", species: ["C", "D"] },
    ),
  trajectory_of_events: () =>
    plotTrajectory(simulateStochastic(CONSECUTIVE, {
      rateConstants: { k1: 0.002, "k-1": 0.05, k2: 0.01 },
      initial: { A: 40, B: 60 },
      times: Array.from({ length: 301 }, (_, i) => i),
    })),
  arrhenius: () => plotArrhenius(fitArrhenius(runs), { to: ["20 °C"] }),
  arrhenius_without_errors: () =>
    plotArrhenius(fitArrhenius([
      { temperature: "30 °C", rateConstant: 1e-4 },
      { temperature: "60 °C", rateConstant: 1.9e-3 },
    ])),
};
