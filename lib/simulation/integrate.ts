import type { Integrator } from "./integrator.ts";

/** What an integration is to do. */
export interface IntegrationPlan {
  /** Output times, ascending, none before the integrator's time, s. */
  readonly times: Float64Array;
  /** Called with each output in turn; the array is overwritten afterwards. */
  readonly output: (index: number, y: Float64Array) => void;
  /** Whether no step may reach beyond the last output. */
  readonly endsAtLast?: boolean;
  /** Most steps to take. */
  readonly maxSteps: number;
  /** Stops the integration when aborted. */
  readonly signal?: AbortSignal;
  /** Called now and then with the time reached and the steps taken. */
  readonly progress?: (time: number, steps: number) => void;
}

/** How an integration ended. */
export interface IntegrationEnd {
  /** Whether every output was reached. */
  readonly finished: boolean;
  /** What stopped it, if anything did. */
  readonly what?: "steps" | "aborted" | "failed";
  /** Words about the failure. */
  readonly detail?: string;
  /** Species at fault, in the kernel's numbering; −1 if none. */
  readonly species: number;
  /** Outputs reached. */
  readonly outputs: number;
}

/** Steps between two looks at the signal and two calls of `progress`. */
const STEPS_BETWEEN_LOOKS = 32;

/** Drives an integrator over the output times.
 *
 * An output that stands alone is reached by a step that ends there; outputs that lie close together
 * compared with the steps are read from the dense output. */
export function integrate(integrator: Integrator, plan: IntegrationPlan): IntegrationEnd {
  const { times, output, maxSteps, signal, progress } = plan;
  const count = times.length;
  const between = new Float64Array(integrator.y.length);
  let next = 0;
  let steps = 0;
  while (next < count && times[next] <= integrator.t) output(next++, integrator.y);
  while (next < count) {
    if (steps % STEPS_BETWEEN_LOOKS === 0) {
      if (steps > 0) progress?.(integrator.t, steps);
      if (signal?.aborted) {
        return { finished: false, what: "aborted", species: -1, outputs: next };
      }
    }
    if (steps >= maxSteps) {
      return { finished: false, what: "steps", species: -1, outputs: next };
    }
    const h = integrator.stepSize;
    const alone = integrator.endsOnOutputs &&
      (next + 1 === count || times[next + 1] > times[next] + h);
    const near = times[next] <= integrator.t + 2 * h;
    const last = integrator.endsOnOutputs || plan.endsAtLast ? times[count - 1] : Infinity;
    const failure = integrator.advance(alone && near ? times[next] : last);
    if (failure) {
      return {
        finished: false,
        what: "failed",
        detail: failure.what,
        species: failure.species,
        outputs: next,
      };
    }
    steps++;
    while (next < count && times[next] <= integrator.t) {
      if (times[next] === integrator.t) output(next, integrator.y);
      else {
        integrator.interpolate(times[next], between);
        output(next, between);
      }
      next++;
    }
  }
  return { finished: true, species: -1, outputs: next };
}

/** As {@link integrate}, starting anew at each time where the coefficients bend, so that no step reaches across.
 *
 * @param bends times, s, ascending @param stepAt size of the first step after a bend, s */
export function integrateInParts(
  integrator: Integrator,
  bends: readonly number[],
  stepAt: (time: number, y: Float64Array) => number,
  plan: IntegrationPlan,
): IntegrationEnd {
  const { times, output } = plan;
  const last = times[times.length - 1];
  const inside = bends.filter((bend) => bend > integrator.t && bend < last);
  let done = 0;
  let steps = 0;
  for (const bend of inside) {
    const before = times.subarray(done).findIndex((t) => t > bend);
    const own = times.subarray(done, before < 0 ? undefined : done + before);
    const reachesBend = own.length > 0 && own[own.length - 1] === bend;
    const part = reachesBend ? own : Float64Array.from([...own, bend]);
    const end = integrate(integrator, {
      ...plan,
      times: part,
      endsAtLast: true,
      maxSteps: plan.maxSteps - steps,
      output: (i, y) => {
        if (i < own.length) output(done + i, y);
      },
    });
    if (!end.finished) return { ...end, outputs: done + Math.min(end.outputs, own.length) };
    done += own.length;
    steps = integrator.counts.accepted;
    const y = integrator.y.slice();
    integrator.start(bend, y, stepAt(bend, y));
  }
  const from = done;
  const end = integrate(integrator, {
    ...plan,
    times: times.subarray(from),
    maxSteps: plan.maxSteps - steps,
    output: (i, y) => output(from + i, y),
  });
  return { ...end, outputs: from + end.outputs };
}
