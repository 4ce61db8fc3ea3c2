import prand, { type RandomGenerator } from "pure-rand";

/** Random variates from one seeded generator: the same seed gives the same numbers on every machine.
 *
 * Generator: Mersenne twister, M. Matsumoto & T. Nishimura, ACM Trans. Model. Comput. Simul. 8 (1998) 3; its
 * seeding keeps courses of neighbouring seeds apart from their first number on. */
export class RandomVariates {
  readonly #generator: RandomGenerator;

  /** A generator of its own.
   *
   * @param seed any whole number */
  constructor(seed: number) {
    this.#generator = prand.mersenne(seed);
  }

  /** Uniform on (0, 1), 53 bits; neither end is taken. */
  uniform(): number {
    const high = this.#generator.unsafeNext() >>> 5;
    const low = this.#generator.unsafeNext() >>> 6;
    return (high * 67108864 + low + 0.5) / 9007199254740992;
  }

  /** Exponential with mean 1. */
  exponential(): number {
    return -Math.log(this.uniform());
  }

  /** Poisson with a given mean: by multiplication below 10, by transformed rejection above.
   *
   * Source: D. E. Knuth, The Art of Computer Programming 2, 3.4.1; W. Hörmann, Insurance: Mathematics
   * and Economics 12 (1993) 39 (PTRS). */
  poisson(mean: number): number {
    if (mean <= 0) return 0;
    if (mean < 10) {
      const limit = Math.exp(-mean);
      let product = this.uniform();
      let count = 0;
      while (product > limit) {
        product *= this.uniform();
        count++;
      }
      return count;
    }
    const b = 0.931 + 2.53 * Math.sqrt(mean);
    const a = -0.059 + 0.02483 * b;
    const inverseAlpha = 1.1239 + 1.1328 / (b - 3.4);
    const vr = 0.9277 - 3.6224 / (b - 2);
    const logMean = Math.log(mean);
    for (;;) {
      const u = this.uniform() - 0.5;
      const v = this.uniform();
      const us = 0.5 - Math.abs(u);
      const k = Math.floor((2 * a / us + b) * u + mean + 0.43);
      if (us >= 0.07 && v <= vr) return k;
      if (k < 0 || (us < 0.013 && v > us)) continue;
      const left = Math.log(v * inverseAlpha / (a / (us * us) + b));
      if (left <= k * logMean - mean - logFactorial(k)) return k;
    }
  }
}

/** ln k!, by Stirling's series above 10. */
function logFactorial(k: number): number {
  if (k < 10) {
    let sum = 0;
    for (let i = 2; i <= k; i++) sum += Math.log(i);
    return sum;
  }
  const x = k + 1;
  const square = 1 / (x * x);
  return (x - 0.5) * Math.log(x) - x + 0.91893853320467274178 +
    (1 / 12 - square * (1 / 360 - square * (1 / 1260 - square / 1680))) / x;
}
