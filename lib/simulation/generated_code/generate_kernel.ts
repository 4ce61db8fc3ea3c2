import type { ClosingSum } from "../closing_sums.ts";
import type { JacobianStructure } from "../jacobian_structure.ts";
import type { Kernel } from "../kernel.ts";
import type { ReactionNetwork } from "../reaction_network.ts";
import { compile } from "./compile.ts";
import { factorStatements, solveStatements } from "./factor_source.ts";
import { jacobianStatements, rightSideStatements } from "./network_source.ts";
import { sum } from "./source_text.ts";

/** A kernel of one network as straight-line code. Its operations are those of the interpreted kernel
 * in the same order but for sums of long rows, so the two agree to rounding.
 *
 * @returns a maker of kernels, each with arrays of its own */
export function generateKernel(
  network: ReactionNetwork,
  structure: JacobianStructure,
): () => Kernel {
  const make = compile<(sums: readonly ClosingSum[]) => Kernel>(kernelSource(network, structure));
  return () => make(structure.sums);
}

/** The source of {@link generateKernel}. */
export function kernelSource(network: ReactionNetwork, structure: JacobianStructure): string {
  const n = network.size;
  const entries = structure.jacobianColumn.length;
  const factors = structure.column.length;
  const indices = Array.from({ length: n }, (_, i) => i);
  const store = (array: string, name: string) =>
    indices.map((i) => `${array}[${i}] = ${name}${i};`);
  const rates = network.reactions.map(({ reactants }, j) =>
    `rates[${j}] = ${[`k[${j}]`, ...reactants.map((i) => `y[${i}]`)].join(" * ")};`
  );
  const product = indices.map((i) => {
    let text = "";
    for (let q = structure.jacobianStart[i]; q < structure.jacobianStart[i + 1]; q++) {
      text += `${text && " + "}J[${q}] * vector[${structure.jacobianColumn[q]}]`;
    }
    return `product[${i}] = ${text || "0"};`;
  });
  const solve = solveStatements(structure);
  return [
    `"use strict";`,
    `return function (sums) {`,
    // one buffer for all arrays, so that none is so small that V8 keeps it among its own objects
    `const buffer = new ArrayBuffer(${8 * (entries + factors + n + 64)});`,
    `const J = new Float64Array(buffer, 0, ${entries});`,
    `const L = new Float64Array(buffer, ${8 * entries}, ${factors});`,
    `const P = new Float64Array(buffer, ${8 * (entries + factors)}, ${n + 1});`,
    `return {`,
    `size: ${n}, reactionCount: ${network.reactions.length}, generated: true, generatedFactors: true, sums,`,
    `rates(y, k, rates) {`,
    ...rates,
    `},`,
    `rightSide(y, k, dydt) {`,
    ...rightSideStatements(network, (i) => `y[${i}]`),
    ...store("dydt", "f"),
    `},`,
    `linearize(y, k) {`,
    ...jacobianStatements(network, structure, (i) => `y[${i}]`),
    `},`,
    `timesJacobian(vector, product) {`,
    ...product,
    `},`,
    `factor(d) {`,
    `P[${n}] = d;`,
    ...factorStatements(structure),
    `},`,
    `solve(x) {`,
    ...indices.map((i) => `let b${i} = x[${i}];`),
    ...structure.sums.map(({ closing, species, weights }) =>
      `b${closing} = (b${closing} - (${
        sum(species.map((i, q) => [weights[q], `b${i}`]))
      })) / P[${n}];`
    ),
    ...solve,
    ...store("x", "b"),
    `},`,
    `solveStage(u, k, x) {`,
    ...rightSideStatements(network, (i) => `u[${i}]`),
    ...indices.map((i) => `let b${i} = f${i} + x[${i}];`),
    ...structure.sums.map(({ closing }) => `b${closing} = 0;`),
    ...solve,
    ...store("x", "b"),
    `},`,
    `};`,
    `};`,
  ].join("\n");
}
