/** Time from a mechanism's text to the end of its first step, ms, in a process of its own: first cold,
 * then for a second mechanism of the same size, as in a process that has compiled one before.
 *
 *     deno run -A test/bench/compile_time.ts PROBLEM */
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { simulate } from "../../lib/simulation/simulate.ts";
import { prepare, problem } from "./problems.ts";

const p = problem(Deno.args[0]);
const { rateConstants, initial } = prepare(p);
const text = p.steps.map(([step]) => step).join("\n");
// the same network in another order of steps: other code, so that no cache of V8 answers
const turned = [...p.steps.slice(1), p.steps[0]].map(([step]) => step).join("\n");

function firstStep(notation: string): number {
  const start = performance.now();
  const mechanism = parseMechanism(notation);
  simulate(mechanism, { rateConstants, initial, times: [p.times[0]], maxSteps: 1, rtol: 1e-6 });
  return performance.now() - start;
}

console.log(JSON.stringify({ cold: firstStep(text), next: firstStep(turned) }));
