import { BackwardDifferentiation } from "./backward_differentiation.ts";
import type { Integrator } from "./integrator.ts";
import type { Kernel } from "./kernel.ts";
import type { RateCoefficients } from "./rate_coefficients.ts";
import { Rosenbrock } from "./rosenbrock.ts";

/** Methods of integration by name. */
export type MethodName = "rosenbrock" | "bdf";

/** The integrator asked for, or the faster one for a network's size and the tolerance. */
export function chooseIntegrator(
  method: MethodName | undefined,
  kernel: Kernel,
  coefficients: RateCoefficients,
  rtol: number,
  atol: Float64Array,
): Integrator {
  if (method === "bdf") return new BackwardDifferentiation(kernel, coefficients, rtol, atol);
  return new Rosenbrock(kernel, coefficients, rtol, atol);
}
