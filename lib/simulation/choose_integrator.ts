import { BackwardDifferentiation } from "./backward_differentiation.ts";
import type { Integrator } from "./integrator.ts";
import type { Kernel } from "./kernel.ts";
import type { RateCoefficients } from "./rate_coefficients.ts";
import { Rosenbrock } from "./rosenbrock.ts";

/** Methods of integration by name. */
export type MethodName = "rosenbrock" | "bdf";

/** Relative tolerance below which many species are followed by the multistep method. */
const TIGHT = 5e-5;

/** A multistep method adds up the errors of its many steps, the more of them the tighter the tolerance
 * is: it is given this part of it (measured on random networks of 100 to 3000 species). */
function multistepShare(rtol: number): number {
  const share = Math.min(0.1, 0.1 * Math.pow(rtol / 1e-6, 0.125));
  return Math.max(share, Math.min(1, 2e-14 / rtol));
}

/** The integrator asked for, or the one that delivers the tolerance sooner: the Rosenbrock method for
 * networks that run as generated code and for loose tolerances, backward differentiation for large
 * networks at tight ones, where a factorization in every step would cost too much (measured; see
 * test/bench/README.md). */
export function chooseIntegrator(
  method: MethodName | undefined,
  kernel: Kernel,
  coefficients: RateCoefficients,
  rtol: number,
  atol: Float64Array,
): Integrator {
  const chosen = method ??
    (kernel.generatedFactors || kernel.size <= 60 || rtol >= TIGHT ? "rosenbrock" : "bdf");
  if (chosen === "rosenbrock") return new Rosenbrock(kernel, coefficients, rtol, atol);
  const share = multistepShare(rtol);
  return new BackwardDifferentiation(
    kernel,
    coefficients,
    rtol * share,
    atol.map((tolerance) => tolerance * share),
  );
}
