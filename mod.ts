/** Ratebook: from files of runs to a rate law, an activation energy and a report.
 *
 * @example The main job
 * ```ts
 * import { ok, strictEqual } from "node:assert";
 * import { compareRateLaws, fitArrhenius, readRuns } from "ratebook";
 *
 * const runs = await readRuns("data/e17_hydrolysis.csv");
 * const warmest = runs.filter((run) => run.temperature! > 353);
 * strictEqual(compareRateLaws(warmest).best?.order.value, 1);
 * const fit = fitArrhenius(runs, { order: 1 });
 * const [low, high] = fit.activationEnergy.interval(0.99);
 * ok(low < 84 && 84 < high); // the value behind these invented data, kJ/mol
 * ```
 *
 * @module */

// Quantities
export { Estimate } from "./lib/quantity/estimate.ts";
export type { EstimateInput, EstimateJson } from "./lib/quantity/estimate.ts";
export { rateConstantUnit } from "./lib/quantity/rate_constant_unit.ts";
export type { RateConstantUnitOptions } from "./lib/quantity/rate_constant_unit.ts";
export { readQuantity } from "./lib/quantity/read_quantity.ts";
export type { Quantity } from "./lib/quantity/read_quantity.ts";
export { UnitError } from "./lib/quantity/unit.ts";
export { Result } from "./lib/quantity/result.ts";
export type { EvidenceBundle, Source } from "./lib/quantity/result.ts";
export type { Cell, Column, Row, Section, ShownNumber } from "./lib/quantity/section.ts";
export type { Caution, Severity } from "./lib/quantity/caution.ts";

// Statistics
export { LinearFit, linearLeastSquares } from "./lib/statistics/linear_least_squares.ts";
export type { LinearLeastSquaresOptions } from "./lib/statistics/linear_least_squares.ts";
export { NonlinearFit, nonlinearLeastSquares } from "./lib/statistics/nonlinear_least_squares.ts";
export type {
  Model,
  NonlinearLeastSquaresOptions,
} from "./lib/statistics/nonlinear_least_squares.ts";
export { correctedAkaike } from "./lib/statistics/information_criterion.ts";
export { nestedFTest } from "./lib/statistics/nested_f_test.ts";
export type { FTest, SumOfSquares } from "./lib/statistics/nested_f_test.ts";
export { runsTest } from "./lib/statistics/runs_test.ts";
export type { RunsTest } from "./lib/statistics/runs_test.ts";
export { durbinWatson } from "./lib/statistics/durbin_watson.ts";
export type { ResidualCheck } from "./lib/statistics/residual_check.ts";
export type { FitOutcome } from "./lib/statistics/least_squares_fit.ts";

// Runs
export { Run } from "./lib/run/run.ts";
export { RunSet } from "./lib/run/run_set.ts";
export type { ReadingRow } from "./lib/run/reading_rows.ts";
export type { Exclusion, RunInput, TimesInput } from "./lib/run/run.ts";
export type {
  CensoredReading,
  SharedUncertainty,
  Signal,
  SignalInput,
  SignalQuantity,
} from "./lib/run/signal.ts";
export { readRuns } from "./lib/run/read_runs.ts";
export type { ReadRunsOptions, RunSource } from "./lib/run/read_runs.ts";
export type { RowObjects } from "./lib/run/row_objects.ts";
export type { RunFacts } from "./lib/run/run_facts.ts";
export { RunFileError } from "./lib/run/run_file_error.ts";
export type { FilePlace, RunFileFault } from "./lib/run/run_file_error.ts";
export type { TextSource } from "./lib/run/source_text.ts";
export type { Separator } from "./lib/run/table.ts";
export type { DecimalMark } from "./lib/run/number_cell.ts";
export { toDataFrame } from "./lib/run/data_frame.ts";
export type { DataFrame } from "./lib/run/data_frame.ts";

export { absorbanceToConcentration } from "./lib/run/absorbance_to_concentration.ts";
export type { AbsorbanceOptions } from "./lib/run/absorbance_to_concentration.ts";
export { applyCalibration } from "./lib/run/apply_calibration.ts";
export type { CalibrationOptions } from "./lib/run/apply_calibration.ts";
export { pressureToConcentration } from "./lib/run/pressure_to_concentration.ts";
export type { PressureOptions } from "./lib/run/pressure_to_concentration.ts";
export type { UncertainQuantity } from "./lib/run/estimate_option.ts";

// Rate laws
export { Linearization, linearize } from "./lib/rate_law/linearize.ts";
export type { LinearizeOptions } from "./lib/rate_law/linearize.ts";
export { fitRateLaw } from "./lib/rate_law/fit_rate_law.ts";
export type { FitRateLawOptions, Runs } from "./lib/rate_law/fit_rate_law.ts";
export type { EndValue, FollowedSignal } from "./lib/rate_law/followed_signal.ts";
export type { RateEquation } from "./lib/rate_law/rate_equation.ts";
export { RateLawFit } from "./lib/rate_law/rate_law_fit.ts";
export type { RateLawFitParts, RunFit } from "./lib/rate_law/rate_law_fit.ts";
export { compareRateLaws } from "./lib/rate_law/compare_rate_laws.ts";
export type { CompareRateLawsOptions } from "./lib/rate_law/compare_rate_laws.ts";
export { RateLawComparison } from "./lib/rate_law/rate_law_comparison.ts";
export type { RateLawRank } from "./lib/rate_law/rate_law_comparison.ts";

// Temperature
export { fitArrhenius } from "./lib/temperature/fit_arrhenius.ts";
export type { FitArrheniusOptions, RateConstantRow } from "./lib/temperature/fit_arrhenius.ts";
export { ArrheniusFit } from "./lib/temperature/arrhenius_fit.ts";
export type {
  ArrheniusBand,
  ArrheniusFitParts,
  RateConstantPoint,
} from "./lib/temperature/arrhenius_fit.ts";
export { PredictedRateConstant } from "./lib/temperature/predicted_rate_constant.ts";

// Mechanisms
export { mechanism, parseMechanism } from "./lib/mechanism/parse_mechanism.ts";
export { Mechanism } from "./lib/mechanism/mechanism.ts";
export { MechanismSyntaxError } from "./lib/mechanism/mechanism_syntax_error.ts";
export type { NotationFault } from "./lib/mechanism/mechanism_syntax_error.ts";
export type { ElementaryStep, Participant } from "./lib/mechanism/elementary_step.ts";

// Simulation
export { simulate } from "./lib/simulation/simulate.ts";
export type { SimulateOptions } from "./lib/simulation/simulate.ts";
export { Trajectory } from "./lib/simulation/trajectory.ts";
export type { ConservedQuantity, SimulationStatistics } from "./lib/simulation/trajectory.ts";
export type { MethodName } from "./lib/simulation/choose_integrator.ts";
export type { IntegratorCounts } from "./lib/simulation/integrator.ts";
export type {
  ArrheniusExpression,
  Broadening,
  EyringExpression,
  FallOffExpression,
  RateExpression,
  ReverseExpression,
} from "./lib/simulation/rate_expression.ts";
export type { TemperatureTable } from "./lib/simulation/temperature_programme.ts";
export { Sensitivities, simulateSensitivities } from "./lib/simulation/simulate_sensitivities.ts";
export type { SensitivityOptions } from "./lib/simulation/simulate_sensitivities.ts";
export { simulateStochastic } from "./lib/simulation/simulate_stochastic.ts";
export type { SimulateStochasticOptions } from "./lib/simulation/simulate_stochastic.ts";
export { StochasticTrajectory } from "./lib/simulation/stochastic_trajectory.ts";
export type { StochasticTrajectoryParts } from "./lib/simulation/stochastic_trajectory.ts";

// Figures
export { Figure } from "./lib/figure/figure.ts";
export { plotRuns } from "./lib/figure/plot_runs.ts";
export type { PlotRunsOptions } from "./lib/figure/plot_runs.ts";
export { plotLinearizations } from "./lib/figure/plot_linearizations.ts";
export { plotResiduals } from "./lib/figure/plot_residuals.ts";
export { plotArrhenius } from "./lib/figure/plot_arrhenius.ts";
export type { PlotArrheniusOptions } from "./lib/figure/plot_arrhenius.ts";

export { plotTrajectory } from "./lib/figure/plot_trajectory.ts";
export type { PlotTrajectoryOptions } from "./lib/figure/plot_trajectory.ts";

// Reports
export { NotebookCellError, runNotebook } from "./lib/report/run_notebook.ts";
export type { NotebookProgress, RunNotebookOptions } from "./lib/report/run_notebook.ts";
export { KernelError } from "./lib/report/kernel.ts";
export type {
  MimeBundle,
  MultilineText,
  Notebook,
  NotebookCell,
  Output,
} from "./lib/report/notebook.ts";
export { renderReport } from "./lib/report/render_report.ts";
export type { RenderReportOptions } from "./lib/report/report_page.ts";
