/** One fault of a mechanism's text: where it is and what to write instead. */
export interface NotationFault {
  /** Line, from 1. */
  readonly line: number;
  /** Column, from 1. */
  readonly column: number;
  /** What is wrong, with the piece at fault, and the fix. */
  readonly message: string;
}

/** Thrown where a text is not a mechanism; it carries every fault found, in reading order. */
export class MechanismSyntaxError extends SyntaxError {
  /** Every fault, in reading order. */
  readonly faults: readonly NotationFault[];
  /** Line of the first fault, from 1. */
  readonly line: number;
  /** Column of the first fault, from 1. */
  readonly column: number;

  /** The error of these faults.
   *
   * @param faults at least one fault, in reading order */
  constructor(faults: readonly NotationFault[]) {
    const list = faults.map((f) => `line ${f.line}, column ${f.column}: ${f.message}`);
    super(
      list.length === 1
        ? `Cannot parse the mechanism: ${list[0]}`
        : `Cannot parse the mechanism: ${list.length} faults\n  ${list.join("\n  ")}`,
    );
    this.name = "MechanismSyntaxError";
    this.faults = faults;
    this.line = faults[0].line;
    this.column = faults[0].column;
  }
}
