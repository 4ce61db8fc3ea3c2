import fc from "fast-check";
import type { Mechanism } from "../../lib/mechanism/mechanism.ts";
import { parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";

/** A random mechanism whose steps all conserve a positive mass, with its constants. */
export interface RandomMechanism {
  readonly lines: readonly string[];
  readonly mechanism: Mechanism;
  readonly rateConstants: Record<string, number>;
  readonly initial: Record<string, number>;
  readonly mass: Record<string, number>;
}

/** Draws mass-conserving mechanisms of up to `most` species, molecularity 1 to 3. */
export function randomMechanism(most = 8): fc.Arbitrary<RandomMechanism> {
  return fc.record({
    masses: fc.array(fc.integer({ min: 1, max: 4 }), { minLength: 3, maxLength: most }),
    picks: fc.array(
      fc.record({
        left: fc.array(fc.nat(1000), { minLength: 1, maxLength: 3 }),
        right: fc.array(fc.nat(1000), { minLength: 1, maxLength: 3 }),
        k: fc.double({ min: -2, max: 3, noNaN: true }),
      }),
      { minLength: 40, maxLength: 60 },
    ),
    start: fc.array(fc.double({ min: 0.05, max: 1, noNaN: true }), {
      minLength: most,
      maxLength: most,
    }),
  }).map(({ masses, picks, start }) => {
    const name = (i: number) => `X${i + 1}`;
    const lines: string[] = [];
    const rateConstants: Record<string, number> = {};
    for (const { left, right, k } of picks) {
      const [l, r] = [left, right].map((side) => side.map((i) => i % masses.length).sort());
      const total = (side: number[]) => side.reduce((sum, i) => sum + masses[i], 0);
      if (total(l) !== total(r) || l.join() === r.join() || lines.length >= 2 * masses.length) {
        continue;
      }
      const symbol = `k${lines.length + 1}`;
      lines.push(`${l.map(name).join(" + ")} ->[${symbol}] ${r.map(name).join(" + ")}`);
      rateConstants[symbol] = Math.pow(10, k);
    }
    if (lines.length === 0) {
      lines.push("X1 ->[k1] X2", "X2 ->[k2] X1");
      masses[1] = masses[0];
      Object.assign(rateConstants, { k1: 1, k2: 2 });
    }
    const mechanism = parseMechanism(lines.join("\n"));
    const initial: Record<string, number> = {};
    const mass: Record<string, number> = {};
    mechanism.species.forEach((species, i) => {
      initial[species] = start[i];
      mass[species] = masses[Number(species.slice(1)) - 1];
    });
    return { lines, mechanism, rateConstants, initial, mass };
  });
}
