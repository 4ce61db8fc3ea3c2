/** Times the simulation core, beside the native peers where they can be run.
 *
 *     deno run -A test/bench/simulation_bench.ts [--peers FOLDER] [--problems A,B] [--no-scipy] [--json FILE]
 *
 * How to read the table: see README.md beside this file. */
import { parseArgs } from "node:util";
import { simulateSensitivities } from "../../lib/simulation/simulate_sensitivities.ts";
import { medianTime } from "./median_time.ts";
import { type NativeRun, runPeers } from "./native_peers.ts";
import {
  deliveredError,
  errorsAt,
  GENERATED,
  prepare,
  type Problem,
  problem,
  solve,
  STORED,
} from "./problems.ts";
import { bestRuns, geometricMean, timeAt } from "./work_precision.ts";

const { values: options } = parseArgs({
  options: {
    peers: { type: "string" },
    problems: { type: "string" },
    "no-scipy": { type: "boolean", default: false },
    json: { type: "string" },
  },
});

interface OwnRun {
  readonly rtol: number;
  readonly method: string;
  readonly steps: number;
  readonly ms: number;
  readonly error: number;
}

const OWN = [1e-2, 1e-3, 1e-4, 1e-5, 1e-6, 1e-7, 1e-8, 1e-9, 1e-10];
const NATIVE = [1e-4, 1e-6, 1e-8, 1e-10];
const names = options.problems?.split(",") ?? [...STORED, ...GENERATED];

function ownRuns(p: Problem): OwnRun[] {
  const prepared = prepare(p);
  const long = p.species.length >= 1000;
  return OWN.filter((rtol) => !(long && rtol < 1e-10)).map((rtol) => {
    let result = solve(p, prepared, rtol);
    const ms = medianTime(() => result = solve(p, prepared, rtol), long ? 100 : 400, long ? 1 : 3);
    return {
      rtol,
      method: result.statistics.method,
      steps: result.statistics.accepted,
      ms,
      error: result.finished ? deliveredError(p, errorsAt(p, result)) : Infinity,
    };
  });
}

/** From text to the end of the first step, in fresh processes: medians of five, ms. */
async function compileTimes(name: string): Promise<{ cold: number; next: number }> {
  const runs: { cold: number; next: number }[] = [];
  for (let i = 0; i < 5; i++) {
    const { stdout } = await new Deno.Command(Deno.execPath(), {
      args: ["run", "-A", new URL("compile_time.ts", import.meta.url).pathname, name],
      stderr: "inherit",
    }).output();
    runs.push(JSON.parse(new TextDecoder().decode(stdout)));
  }
  const middle = (values: number[]) => values.sort((a, b) => a - b)[values.length >> 1];
  return { cold: middle(runs.map((r) => r.cold)), next: middle(runs.map((r) => r.next)) };
}

/** Time of the concentrations with their sensitivities to every rate constant, over the time of the
 * concentrations alone, at the same tolerance, and the sensitivities' delivered error. */
function sensitivityRun(p: Problem, rtol: number): { ratio: number; ms: number; error: number } {
  const prepared = prepare(p);
  const { reference } = p;
  const once = () =>
    simulateSensitivities(prepared.mechanism, {
      rateConstants: prepared.rateConstants,
      initial: prepared.initial,
      times: p.times,
      rtol,
      atol: rtol * p.atolFactor,
      maxSteps: 1e6,
    });
  let result = once();
  const ms = medianTime(() => result = once(), 300);
  const plain = medianTime(() => solve(p, prepared, rtol), 300);
  let error = reference?.sensitivities ? 0 : NaN;
  reference?.sensitivities?.outputs.forEach((output, at) =>
    prepared.mechanism.rateConstants.forEach((k, j) =>
      p.species.forEach((species, i) => {
        const expected = reference.sensitivities!.values[at][j][i];
        const difference = Math.abs(result.logarithmic(species, k)[output] - expected);
        error = Math.max(
          error,
          difference / (Math.abs(expected) + reference.sensitivities!.floor[i]),
        );
      })
    )
  );
  return { ratio: ms / plain, ms, error };
}

const fixed = (value: number, digits = 2): string =>
  Number.isFinite(value)
    ? value < 0.001 || value >= 1e5 ? value.toExponential(1) : value.toPrecision(digits)
    : "–";
const line = (...cells: string[]) =>
  console.log(cells.map((cell, i) => cell.padEnd(i === 0 ? 11 : 10)).join(" "));

const report: Record<string, unknown>[] = [];
const scipyFactors: { problem: string; factor: number }[] = [];
if (!options.peers) {
  console.log(
    "The native peers were not run (give their folder with --peers): times stand alone.\n",
  );
}
line(
  "problem",
  "rtol",
  "method",
  "steps",
  "ms",
  "error",
  "err/rtol",
  "native ms",
  "nat. err",
  "ratio",
  "bar",
);
for (const name of names) {
  const p = problem(name, options.peers);
  const compile = await compileTimes(name);
  const own = ownRuns(p);
  const native: NativeRun[] = options.peers
    ? await runPeers(options.peers, p, NATIVE, options["no-scipy"])
    : [];
  for (const rtol of NATIVE) {
    const run = own.find((r) => r.rtol === rtol)!;
    const peer = native.find((r) => r.solver === "cvode" && r.rtol === rtol && r.error < Infinity);
    const ratio = peer ? timeAt(own, peer.error) / peer.ms : NaN;
    const bar = p.species.length > 60 ? 1 : rtol < 1e-9 ? 0.5 : 0.2;
    line(
      name,
      rtol.toExponential(0),
      run.method,
      String(run.steps),
      fixed(run.ms, 3),
      fixed(run.error),
      fixed(run.error / rtol),
      fixed(peer?.ms ?? NaN, 3),
      fixed(peer?.error ?? NaN),
      fixed(ratio),
      peer ? (ratio <= bar ? `≤ ${bar}` : `MISSES ${bar}`) : "",
    );
  }
  const scipy = bestRuns(native.filter((r) => r.solver.startsWith("scipy")));
  const factors = scipy.map((run) => run.ms / timeAt(own, run.error)).filter((f) => f > 0);
  if (factors.length > 0) {
    const factor = geometricMean(factors);
    scipyFactors.push({ problem: name, factor });
    console.log(
      `            SciPy's best takes ${fixed(factor, 3)} times as long (${
        fixed(Math.min(...factors), 3)
      } at least)`,
    );
  }
  console.log(
    `            parse to first step ${fixed(compile.cold, 3)} ms in a new process, then ` +
      `${fixed(compile.next, 3)} ms`,
  );
  const parameters = p.steps.length;
  const sensitivities = parameters > 30 ? [] : [1e-4, 1e-6, 1e-8].map((rtol) => {
    const run = sensitivityRun(p, rtol);
    const peer = native.find((r) => r.solver === "cvodes-sens" && r.rtol === rtol);
    const share = (run.ratio - 1) / parameters;
    console.log(
      `            sensitivities to ${parameters} constants at ${rtol.toExponential(0)}: ` +
        `${fixed(run.ms, 3)} ms, 1 + ${fixed(share)} p plain runs (bar 0.5${
          share <= 0.5 ? "" : ": MISSES"
        }), error ${fixed(run.error)}` +
        (peer
          ? `; native ${fixed(peer.ms, 3)} ms, error ${fixed(peer.sensitivityError ?? NaN)}`
          : ""),
    );
    return { rtol, parameters, ...run };
  });
  report.push({
    problem: name,
    species: p.species.length,
    compileMs: compile,
    own,
    native,
    sensitivities,
  });
}
if (scipyFactors.length > 0) {
  console.log(
    `\nSciPy, geometric mean over problems: ${
      fixed(geometricMean(scipyFactors.map((f) => f.factor)), 3)
    } times as long`,
  );
}
if (options.json) {
  await Deno.writeTextFile(
    options.json,
    JSON.stringify({ date: new Date().toISOString(), deno: Deno.version, report }, null, 1) + "\n",
  );
}
