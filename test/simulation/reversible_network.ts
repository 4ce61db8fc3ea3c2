import fc from "fast-check";
import type { Mechanism } from "../../lib/mechanism/mechanism.ts";
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";

/** A side of a step, as indices of species, each as often as it takes part. */
type Complex = readonly number[];

/** Reversible steps between species made of two elements, with constants that a table of Gibbs energies
 * gives, so that every step rests at equilibrium. */
export interface ReversibleNetwork {
  /** The steps, with their symbols, in the order drawn. */
  readonly lines: readonly string[];
  readonly mechanism: Mechanism;
  readonly rateConstants: Readonly<Record<string, number>>;
  readonly initial: Readonly<Record<string, number>>;
  /** Numbers of both elements in each species of the mechanism. */
  readonly composition: Readonly<Record<string, readonly [number, number]>>;
}

const name = (species: number) => `Y${species + 1}`;

/** Draws networks from 3 to `most` species, not all of which need react, with up to twice as many steps. */
export function reversibleNetwork(most = 12): fc.Arbitrary<ReversibleNetwork> {
  const species = fc.record({
    elements: fc.tuple(fc.integer({ min: 1, max: 3 }), fc.integer({ min: 0, max: 2 })),
    energy: fc.double({ min: -3, max: 3, noNaN: true }),
    start: fc.double({ min: 0.05, max: 1, noNaN: true }),
  });
  const draw = fc.record({ pick: fc.nat(), log10k: fc.double({ min: -2, max: 3, noNaN: true }) });
  return fc.tuple(
    fc.array(species, { minLength: 3, maxLength: most }),
    fc.array(draw, { minLength: 2, maxLength: 2 * most }),
  ).map(([drawn, draws]) => {
    // the third species is made of the first two, and the second an isomer of the first, so that steps exist
    const [first] = drawn;
    const all = drawn.map((s, i) => {
      if (i === 1) return { ...s, elements: first.elements };
      const [p, q] = first.elements;
      return i === 2 ? { ...s, elements: [2 * p, 2 * q] as const } : s;
    });
    return build(all, draws);
  });
}

interface DrawnSpecies {
  readonly elements: readonly [number, number];
  readonly energy: number;
  readonly start: number;
}

function build(
  species: readonly DrawnSpecies[],
  draws: readonly { pick: number; log10k: number }[],
): ReversibleNetwork {
  const pairs = balanced(species.map((s) => s.elements));
  const lines: string[] = [];
  const rateConstants: Record<string, number> = {};
  const energyOf = (side: Complex) => side.reduce((sum, i) => sum + species[i].energy, 0);
  const taken = new Set<number>();
  for (const { pick, log10k } of draws) {
    const at = pick % pairs.length;
    if (taken.has(at)) continue;
    taken.add(at);
    const [left, right] = pairs[at];
    const number = lines.length + 1;
    const [forward, reverse] = [`k${number}`, `k-${number}`];
    const sides = [left, right].map((side) => side.map(name).join(" + "));
    lines.push(`${sides[0]} <=>[${forward}][${reverse}] ${sides[1]}`);
    rateConstants[forward] = Math.pow(10, log10k);
    rateConstants[reverse] = rateConstants[forward] * Math.exp(energyOf(right) - energyOf(left));
  }
  const mechanism = parseMechanism(lines.join("\n"));
  const of = <T>(value: (s: DrawnSpecies) => T) =>
    Object.fromEntries(mechanism.species.map((s) => [s, value(species[Number(s.slice(1)) - 1])]));
  return {
    lines,
    mechanism,
    rateConstants,
    initial: of((s) => s.start),
    composition: of((s) => s.elements),
  };
}

/** Every pair of different complexes of one to three species with the same elements. */
function balanced(elements: readonly (readonly [number, number])[]): [Complex, Complex][] {
  const bySum = new Map<string, Complex[]>();
  const add = (...side: number[]) => {
    const key = [0, 1].map((e) => side.reduce((sum, i) => sum + elements[i][e], 0)).join();
    if (!bySum.has(key)) bySum.set(key, []);
    bySum.get(key)!.push(side);
  };
  for (let a = 0; a < elements.length; a++) {
    add(a);
    for (let b = a; b < elements.length; b++) add(a, b);
    add(a, a, (a + 1) % elements.length);
  }
  return [...bySum.values()].flatMap((complexes) =>
    complexes.flatMap((left, i) =>
      complexes.slice(i + 1).map((right): [Complex, Complex] => [left, right])
    )
  );
}
