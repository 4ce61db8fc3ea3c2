/** The one place where text becomes code. The text is made here from numbers only: indices and
 * coefficients of a network, never names or anything else a user wrote. */
export function compile<T>(source: string): T {
  return new Function(source)() as T;
}

let allowed: boolean | undefined;

/** Whether this realm lets text become code (a content-security policy may forbid it). */
export function canCompile(): boolean {
  if (allowed === undefined) {
    try {
      allowed = compile<number>("return 1") === 1;
    } catch {
      allowed = false;
    }
  }
  return allowed;
}
