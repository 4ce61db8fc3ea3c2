/** How much a caution weighs: a note to know, a caution to heed, or a serious one that stands
 * against using the number as it is. */
export type Severity = "note" | "caution" | "serious";

/** Something the reader of a result must know; it travels with the result as data. */
export interface Caution {
  /** Stable name for scripts, such as "temperature-span". */
  readonly code: string;
  /** How much it weighs. */
  readonly severity: Severity;
  /** One or two sentences with the numbers behind them. */
  readonly message: string;
  /** What it is about: a run, a parameter, a temperature. */
  readonly subject?: string;
}

/** Thrown where a result would be misleading and the caller has not asked for it all the same. */
export class RefusedError extends RangeError {
  /** The caution that stands against the result. */
  readonly caution: Caution;

  /** @param caution why the result is refused */
  constructor(caution: Caution) {
    super(caution.message);
    this.name = "RefusedError";
    this.caution = caution;
  }
}

/** A caution as one line: `Note: …`, `Caution: …` or `Serious caution: …`. */
export function formatCaution(caution: Caution): string {
  const label = caution.severity === "note"
    ? "Note"
    : caution.severity === "caution"
    ? "Caution"
    : "Serious caution";
  return `${label}: ${caution.message}`;
}
