import type { Caution } from "../quantity/caution.ts";
import { GAS_CONSTANT } from "../quantity/constants.ts";
import { rateConstantUnit } from "../quantity/rate_constant_unit.ts";
import type { EndValue } from "../rate_law/followed_signal.ts";
import { followSignal } from "../rate_law/followed_signal.ts";
import {
  cautionsOfRuns,
  fitRateLaw,
  leftOutCautions,
  listRuns,
  type Runs,
} from "../rate_law/fit_rate_law.ts";
import { rateEquation } from "../rate_law/rate_equation.ts";
import { type SharedLaw, SignalModel } from "../rate_law/signal_model.ts";
import { RunSet } from "../run/run_set.ts";
import type { Run } from "../run/run.ts";
import { fitLeastSquares } from "../statistics/least_squares_fit.ts";
import { type FTest, nestedFTest } from "../statistics/nested_f_test.ts";
import { ArrheniusFit, type RateConstantPoint } from "./arrhenius_fit.ts";
import { fitLogLine } from "./log_line.ts";
import { temperatureCautions } from "./temperature_gates.ts";

/** The options of a fit to runs, read. */
export interface RunsArrheniusOptions {
  /** Unit of the result. */
  readonly unit?: string;
  readonly order?: number;
  readonly species?: string;
  readonly endValue?: EndValue;
  readonly reactant?: string;
  readonly maxIterations?: number;
  readonly signal?: AbortSignal;
}

/** Below this probability the runs scatter about the line by more than their readings' noise. */
const LACK_OF_FIT_PROBABILITY = 0.05;

/** Fits the Arrhenius equation to all runs in one likelihood: ln k_ref and Ea shared, initial and free
 * end values each run's own.
 *
 * The runs are also fitted one by one, with the same noise, for the points of the picture and for an F
 * test of the line against a rate constant of each run's own. Where that test fails, something beyond
 * the readings' noise (an error of temperature, a run that went wrong, a bent line) moves the rate
 * constants; the errors are then widened by √F, which is the Birge ratio of the line.
 *
 * @throws {RangeError} if a run has no temperature, fewer than 2 temperatures were measured, or a fit did
 * not converge */
export function fitArrheniusToRuns(runs: Runs, options: RunsArrheniusOptions): ArrheniusFit {
  const list = listRuns(runs);
  const temperatures = list.map(knownTemperature);
  if (new Set(temperatures).size < 2) {
    throw new RangeError(
      `Cannot fit an activation energy to runs at ${new Set(temperatures).size} temperature: ` +
        `give runs at 3 or more`,
    );
  }
  const { order = 1 } = options;
  const unit = rateConstantUnit(order);
  const law = {
    order,
    species: options.species,
    endValue: options.endValue,
    reactant: options.reactant,
    maxIterations: options.maxIterations,
    signal: options.signal,
  };
  const signals = list.map((run) => followSignal(run, law));
  const single = list.map((run) => fitRateLaw(run, law));
  const unsettled = single.find((fit) => !fit.converged || !(fit.rateConstant.value > 0));
  if (unsettled) {
    throw new RangeError(
      `Cannot fit the Arrhenius equation: run "${unsettled.runs[0].run}" by itself gives k = ` +
        `${unsettled.rateConstant} (${unsettled.reason}); leave it out with runs.filter(...) or ` +
        `choose another order`,
    );
  }
  const rough = fitLogLine(
    temperatures.map((t) => 1 / t),
    single.map((fit) => Math.log(fit.rateConstant.value)),
  );
  // Parameters: ln k at T0, and Ea/(R·T0), both of order 1 to 100.
  const t0 = 1 / rough.reference;
  const model = new SignalModel(signals, 2);
  const shared: SharedLaw = (p, i) => ({
    rateConstant: Math.exp(p[0] - p[1] * (t0 / temperatures[i] - 1)),
    order,
  });
  const outcome = fitLeastSquares({
    names: ["ln k at the reference temperature", "Ea/(R·T)", ...model.ownNames],
    count: model.count,
    residuals: model.residuals(shared),
    start: [
      rough.height,
      rough.steepness / t0,
      ...single.flatMap((fit, i) => {
        const [run] = fit.runs;
        const own = [run.initialValue.value];
        return model.places[i].end === undefined ? own : [...own, run.endValue.value];
      }),
    ],
    maxIterations: options.maxIterations,
    signal: options.signal,
  });
  if (!outcome.converged) {
    throw new RangeError(
      `Cannot fit the Arrhenius equation to the runs at once: ${outcome.reason}; fit the runs one by ` +
        `one with fitRateLaw and pass their rate constants`,
    );
  }
  const lackOfFit = lineAgainstRuns(outcome, single);
  const scatter = lackOfFit && lackOfFit.probability < LACK_OF_FIT_PROBABILITY;
  const widening = scatter ? lackOfFit.f : 1;
  const degreesOfFreedom = scatter ? lackOfFit.degreesOfFreedom[0] : outcome.degreesOfFreedom;
  const [c00, c01, c11] = [
    outcome.covariance[0][0],
    outcome.covariance[0][1],
    outcome.covariance[1][1],
  ].map((c) => c * widening);
  // ln k_ref = p0 − p1·x does not correlate with p1 at x = c01/c11.
  const x = c01 / c11;
  const [p0, p1] = outcome.parameters;
  const referenceTemperature = t0 / (1 + x);
  const logReference = p0 - p1 * x;
  const energy = p1 * GAS_CONSTANT * t0;
  const residuals = Float64Array.from(single, (fit, i) =>
    Math.log(fit.rateConstant.value) -
    (p0 - p1 * (t0 / temperatures[i] - 1)));
  return new ArrheniusFit({
    points: single.map((fit, i): RateConstantPoint => ({
      temperature: temperatures[i],
      rateConstant: fit.rateConstant,
      run: list[i].id,
    })),
    referenceTemperature,
    logReference,
    logReferenceVariance: c00 - c01 * x,
    activationEnergy: energy,
    activationEnergyVariance: c11 * (GAS_CONSTANT * t0) ** 2,
    pointVariance: typicalVariance(single.map((fit) => fit.rateConstant.relativeStandardError)) *
      widening,
    degreesOfFreedom,
    unit,
    residuals,
    lackOfFit,
    equation: rateEquation(signals[0].reactant, order),
    origin: "runs",
    cautions: [
      ...temperatureCautions(temperatures),
      ...outcome.cautions,
      ...(scatter ? [scatterCaution(lackOfFit)] : []),
      ...leftOutCautions(signals),
      ...cautionsOfRuns(runs),
    ],
    sources: runs instanceof RunSet ? runs.sources : [],
  });
}

function knownTemperature(run: Run): number {
  if (run.temperature !== undefined) return run.temperature;
  throw new RangeError(
    `Cannot fit the Arrhenius equation: run "${run.id}" has no temperature; give it in the file ` +
      `(a column "temperature [°C]") or with run.with({ temperature: "25 °C" })`,
  );
}

/** The line against free rate constants, sums of squares added over the runs fitted one by one. */
function lineAgainstRuns(
  line: { residualSumOfSquares: number; degreesOfFreedom: number },
  single: readonly { residualSumOfSquares: number; degreesOfFreedom: number }[],
): FTest | undefined {
  const free = {
    residualSumOfSquares: single.reduce((sum, fit) => sum + fit.residualSumOfSquares, 0),
    degreesOfFreedom: single.reduce((sum, fit) => sum + fit.degreesOfFreedom, 0),
  };
  if (line.degreesOfFreedom <= free.degreesOfFreedom || free.degreesOfFreedom <= 0) {
    return undefined;
  }
  return nestedFTest(line, free);
}

function scatterCaution(test: FTest): Caution {
  return {
    code: "runs-scatter-about-line",
    severity: "caution",
    message:
      `The rate constants of the runs scatter about the line more than the noise of their readings ` +
      `allows (F(${test.degreesOfFreedom.join(", ")}) = ${test.f.toPrecision(3)}, p = ${
        test.probability.toPrecision(2)
      }): the errors were widened by the factor ${
        Math.sqrt(test.f).toPrecision(2)
      }; look for errors of ` +
      `temperature, a run that went wrong, or a bent line`,
  };
}

function typicalVariance(relativeErrors: readonly number[]): number {
  return relativeErrors.reduce((sum, u) => sum + u * u, 0) / relativeErrors.length;
}
