/** The end of a time limit, or an abort before it. */
export interface Deadline {
  /** Settles when the time is over or the signal aborts, whichever comes first. */
  readonly reached: Promise<"timeout" | "aborted">;
  /** Lets go of the timer and the signal. */
  clear(): void;
}

/** Longest time that a timer can wait, ms. */
const LONGEST = 2 ** 31 - 1;

/** Starts a time limit; a signal that has aborted already counts at once.
 *
 * @param seconds the time limit, s @param signal aborts before it */
export function deadline(seconds: number, signal: AbortSignal | undefined): Deadline {
  const { promise, resolve } = Promise.withResolvers<"timeout" | "aborted">();
  const timer = setTimeout(() => resolve("timeout"), Math.min(seconds * 1000, LONGEST));
  const abort = () => resolve("aborted");
  signal?.addEventListener("abort", abort, { once: true });
  if (signal?.aborted) abort();
  return {
    reached: promise,
    clear: () => {
      clearTimeout(timer);
      signal?.removeEventListener("abort", abort);
    },
  };
}
