import type { JacobianStructure } from "../jacobian_structure.ts";
import type { Evaluation } from "../interpreted_kernel.ts";
import { changesBySpecies, type ReactionNetwork } from "../reaction_network.ts";
import { compile } from "./compile.ts";
import { jacobianTerms, rateText } from "./network_source.ts";
import { sum } from "./source_text.ts";

/** Products and sums that one function may hold: V8 leaves a function of more than 60 KB of bytecode
 * unoptimised, and each of them takes some 20 bytes. */
const MOST_OPERATIONS = 1500;

/** Right side and Jacobian of one network as straight-line code in several functions, for networks too
 * large for one: intermediate rates and partial derivatives stand in arrays. */
export function generateEvaluation(
  network: ReactionNetwork,
  structure: JacobianStructure,
): () => Evaluation {
  return compile<() => Evaluation>(evaluationSource(network, structure));
}

/** The source of {@link generateEvaluation}. */
export function evaluationSource(network: ReactionNetwork, structure: JacobianStructure): string {
  const y = (i: number) => `y[${i}]`;
  const rates = network.reactions.map((_, j) => `v[${j}] = ${rateText(network, j, y)};`);
  const slopes = changesBySpecies(network).map((terms, i) =>
    `dydt[${i}] = ${sum(terms.map(([factor, j]) => [factor, `v[${j}]`]))};`
  );
  const { partials, entries } = jacobianTerms(network, structure, y);
  const values = partials.map((text, p) => `d[${p}] = ${text};`);
  const sums = entries.map((terms, q) =>
    `J[${q}] = ${sum(terms.map(([factor, p]) => [factor, `d[${p}]`]))};`
  );
  return [
    `"use strict";`,
    `return function () {`,
    `const v = new Float64Array(${network.reactions.length});`,
    `const d = new Float64Array(${partials.length});`,
    parts("rates", "y, k", rates),
    parts("slopes", "dydt", slopes),
    parts("partials", "y, k", values),
    parts("entries", "J", sums),
    `return {`,
    `rightSide(y, k, dydt) { rates(y, k); slopes(dydt); },`,
    `jacobian(y, k, J) { partials(y, k); entries(J); },`,
    `};`,
    `};`,
  ].join("\n");
}

/** A function of independent statements, as several that are called in turn. */
function parts(name: string, parameters: string, statements: readonly string[]): string {
  const bodies: string[][] = [[]];
  let operations = 0;
  for (const statement of statements) {
    const own = 1 + (statement.match(/[*+]| - /g)?.length ?? 0);
    if (operations + own > MOST_OPERATIONS) {
      bodies.push([]);
      operations = 0;
    }
    bodies[bodies.length - 1].push(statement);
    operations += own;
  }
  const functions = bodies.map((body, part) =>
    `function ${name}${part}(${parameters}) {\n${body.join("\n")}\n}`
  );
  const calls = bodies.map((_, part) => `${name}${part}(${parameters});`);
  return `${functions.join("\n")}\nfunction ${name}(${parameters}) { ${calls.join(" ")} }`;
}
