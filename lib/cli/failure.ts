/** How a command ended that could not do its work. */
export interface Failure {
  /** What to print on standard error. */
  readonly message: string;
  /** 2 for bad input, 1 for work that failed. */
  readonly exitCode: 1 | 2;
}

/** Kinds of error that mean the input was bad: a file, an option, a value, a unit. */
const BAD_INPUT = [SyntaxError, RangeError, Deno.errors.NotFound, Deno.errors.IsADirectory];

/** Turns what was thrown into a message for people: its own words for bad input and for work that
 * failed with a reason, the whole trace for a fault of ours. */
export function failure(error: unknown): Failure {
  if (!(error instanceof Error)) return { message: String(error), exitCode: 1 };
  if (BAD_INPUT.some((kind) => error instanceof kind)) {
    return { message: error.message, exitCode: 2 };
  }
  const explained = error.name !== "TypeError" && error.name !== "Error";
  return { message: explained ? error.message : error.stack ?? error.message, exitCode: 1 };
}
