import type { Problem } from "./problems.ts";

/** Mersenne Twister MT19937 with 53-bit output, seeded by a whole number as its authors' array seeding.
 *
 * Source: M. Matsumoto and T. Nishimura, ACM Trans. Model. Comput. Simul. 8 (1998) 3. */
function mersenneTwister(seed: number): () => number {
  const N = 624;
  const state = new Uint32Array(N);
  state[0] = 19650218;
  for (let i = 1; i < N; i++) {
    state[i] = Math.imul(1812433253, state[i - 1] ^ (state[i - 1] >>> 30)) + i;
  }
  let i = 1;
  for (let k = N; k > 0; k--) {
    state[i] = (state[i] ^ Math.imul(state[i - 1] ^ (state[i - 1] >>> 30), 1664525)) + seed;
    if (++i >= N) {
      state[0] = state[N - 1];
      i = 1;
    }
  }
  for (let k = N - 1; k > 0; k--) {
    state[i] = (state[i] ^ Math.imul(state[i - 1] ^ (state[i - 1] >>> 30), 1566083941)) - i;
    if (++i >= N) {
      state[0] = state[N - 1];
      i = 1;
    }
  }
  state[0] = 0x80000000;
  let at = N;
  const next = () => {
    if (at >= N) {
      for (let k = 0; k < N; k++) {
        const y = (state[k] & 0x80000000) | (state[(k + 1) % N] & 0x7fffffff);
        state[k] = state[(k + 397) % N] ^ (y >>> 1) ^ ((y & 1) === 0 ? 0 : 0x9908b0df);
      }
      at = 0;
    }
    let y = state[at++];
    y ^= y >>> 11;
    y ^= (y << 7) & 0x9d2c5680;
    y ^= (y << 15) & 0xefc60000;
    return (y ^ (y >>> 18)) >>> 0;
  };
  return () => ((next() >>> 5) * 67108864 + (next() >>> 6)) / 9007199254740992;
}

/** Random mass-conserving network with about 3 n steps over 9 decades of rate constants: species have
 * whole masses 1 to 6, a step joins species whose numbers lie close together, and a few carriers
 * may be partners anywhere.
 *
 * Source: the networks random100 … random3000 of the native benchmark, drawn the same way from the
 * same seeds (20240 + n). */
export function randomNetwork(n: number): Problem {
  const random = mersenneTwister(20240 + n);
  const below = (m: number) => Math.trunc(random() * m);
  const carriers = 4;
  const window = 10;
  const mass = Array.from({ length: n }, (_, i) => i < carriers ? 1 + i % 3 : 0);
  for (let i = carriers; i < n; i++) mass[i] = 1 + below(6);
  const near = (i: number) =>
    Math.min(n - 1, Math.max(carriers, i - window + below(2 * window + 1)));
  const start = new Set<number>();
  for (let i = 0; i < carriers; i++) start.add(i);
  const more = Math.floor(n / 10) - carriers;
  const gap = (n - carriers) / more;
  for (let i = 0; i < more; i++) start.add(carriers + Math.trunc((i + random()) * gap));
  const initial: Record<string, number> = {};
  for (const i of [...start].sort((a, b) => a - b)) {
    initial[`S${i + 1}`] = Number((0.1 + 0.9 * random()).toPrecision(3));
  }

  const sides: [number[], number[]][] = [];
  const seen = new Set<string>();
  const add = (left: number[], right: number[]): boolean => {
    const sorted = [left, right].map((side) => [...side].sort((a, b) => a - b));
    const key = sorted.map((side) => side.join()).join(">");
    if (sorted[0].join() === sorted[1].join() || seen.has(key)) return false;
    if (sorted[0].some((i) => sorted[1].includes(i))) return false;
    const total = (side: number[]) => side.reduce((sum, i) => sum + mass[i], 0);
    if (total(left) !== total(right)) return false;
    seen.add(key);
    sides.push([sorted[0], sorted[1]]);
    return true;
  };
  const partner = (i: number) => random() < 0.25 ? below(carriers) : near(i);
  while (sides.length < 3 * n) {
    const a = carriers + below(n - carriers);
    const kind = random();
    for (let attempt = 0; attempt < 60; attempt++) {
      const left = kind < 0.45 ? [a] : [a, partner(a)];
      const alone = kind < 0.25 || 0.45 <= kind && kind < 0.65;
      const right = alone ? [near(a)] : [near(a), partner(a)];
      if (add(left, right)) break;
    }
  }
  while (true) {
    const have = new Set(start);
    for (let grown = true; grown;) {
      grown = false;
      for (const [left, right] of sides) {
        if (right.every((i) => have.has(i)) || !left.every((i) => have.has(i))) continue;
        for (const i of right) have.add(i);
        grown = true;
      }
    }
    const u = Array.from({ length: n }, (_, i) => i).find((i) => !have.has(i));
    if (u === undefined) break;
    let v = -1;
    for (const i of [...have].sort((a, b) => a - b)) {
      if (mass[i] === mass[u] && (v < 0 || Math.abs(i - u) < Math.abs(v - u))) v = i;
    }
    add([v], [u]);
  }
  const rate = () => Number(Math.pow(10, -3 + 9 * random()).toPrecision(5));
  const side = (ids: number[]) => {
    const counts = new Map<number, number>();
    for (const i of ids) counts.set(i, (counts.get(i) ?? 0) + 1);
    return [...counts].map(([i, c]) => c === 1 ? `S${i + 1}` : `${c} S${i + 1}`).join(" + ");
  };
  return {
    name: `random${n}`,
    source: `seeded random network (seed ${20240 + n})`,
    species: mass.map((_, i) => `S${i + 1}`),
    steps: sides.map(([left, right]) => [`${side(left)} -> ${side(right)}`, rate()]),
    initial,
    times: Array.from({ length: 10 }, (_, i) => Number(`1e${i - 6}`)),
    atolFactor: 1e-18,
  };
}
