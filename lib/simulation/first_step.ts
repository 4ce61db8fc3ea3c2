import type { Kernel } from "./kernel.ts";

/** A first step that is short for every species that is there at the start: a hundredth of
 * min |y/ẏ|, times rtol^(1/5), and at most a thousandth of the way to the first output. A step that
 * is too long all the same is rejected and shortened.
 *
 * @param kernel the network's numbers
 * @param y state at the start
 * @param k rate coefficients at the start
 * @param reach time from the start to the first output, s
 * @param rtol relative tolerance
 * @returns step size, s */
export function firstStep(
  kernel: Kernel,
  y: Float64Array,
  k: Float64Array,
  reach: number,
  rtol: number,
): number {
  const slope = new Float64Array(y.length);
  kernel.rightSide(y, k, slope);
  let fastest = 0;
  for (let i = 0; i < y.length; i++) {
    if (y[i] !== 0) fastest = Math.max(fastest, Math.abs(slope[i] / y[i]));
  }
  const most = 1e-3 * reach;
  return fastest > 0 ? Math.min(most, 0.01 * Math.pow(rtol, 0.2) / fastest) : most;
}
