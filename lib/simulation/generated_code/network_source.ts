import type { JacobianStructure } from "../jacobian_structure.ts";
import { changesBySpecies, type ReactionNetwork } from "../reaction_network.ts";
import { literal, sum } from "./source_text.ts";

/** Source of one rate: `k[j] * u0 * u1`, with the name of species i given by `name`. */
export function rateText(
  network: ReactionNetwork,
  j: number,
  name: (species: number) => string,
): string {
  return [`k[${j}]`, ...network.reactions[j].reactants.map(name)].join(" * ");
}

/** Statements for the rates v0, v1 …, then f0, f1 … as constants. */
export function rightSideStatements(
  network: ReactionNetwork,
  name: (species: number) => string,
): string[] {
  const statements = network.reactions.map((_, j) =>
    `const v${j} = ${rateText(network, j, name)};`
  );
  changesBySpecies(network).forEach((terms, i) => {
    statements.push(`const f${i} = ${sum(terms.map(([factor, j]) => [factor, `v${j}`]))};`);
  });
  return statements;
}

/** Sources of the partial derivatives ∂v/∂y, and for each entry of J the partial derivatives in it, each
 * with its factor. */
export function jacobianTerms(
  network: ReactionNetwork,
  structure: JacobianStructure,
  name: (species: number) => string,
): { partials: string[]; entries: [number, number][][] } {
  const partials: string[] = [];
  const entries: [number, number][][] = Array.from(
    { length: structure.jacobianColumn.length },
    () => [],
  );
  for (let p = 0; p < structure.partialReaction.length; p++) {
    const j = structure.partialReaction[p];
    const others = [...network.reactions[j].reactants];
    others.splice(others.indexOf(structure.partialSpecies[p]), 1);
    const order = structure.partialOrder[p];
    const factors = [`k[${j}]`, ...others.map(name)];
    if (order !== 1) factors.unshift(literal(order));
    partials.push(factors.join(" * "));
    for (let q = structure.targetStart[p]; q < structure.targetStart[p + 1]; q++) {
      entries[structure.target[q]].push([structure.targetFactor[q], p]);
    }
  }
  return { partials, entries };
}

/** Statements for the entries of J into the array `J`, from species values named by `name`. */
export function jacobianStatements(
  network: ReactionNetwork,
  structure: JacobianStructure,
  name: (species: number) => string,
): string[] {
  const { partials, entries } = jacobianTerms(network, structure, name);
  return [
    ...partials.map((text, p) => `const d${p} = ${text};`),
    ...entries.map((terms, q) =>
      `J[${q}] = ${sum(terms.map(([factor, p]) => [factor, `d${p}`]))};`
    ),
  ];
}
