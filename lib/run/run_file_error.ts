/** A place in a file. */
export interface FilePlace {
  /** File name. */
  readonly file: string;
  /** Line, from 1. */
  readonly line?: number;
  /** Column, from 1. */
  readonly column?: number;
  /** Header of the column. */
  readonly header?: string;
  /** The cell as it stands. */
  readonly cell?: string;
}

/** One fault of a file. */
export interface RunFileFault extends FilePlace {
  /** What is wrong and what to write instead. */
  readonly message: string;
}

const MOST_SHOWN = 10;

/** A file of runs that cannot be read as it stands; lists its faults, none of which was repaired. */
export class RunFileError extends SyntaxError {
  /** All faults found. */
  readonly faults: readonly RunFileFault[];

  /** The error of these faults.
   *
   * @param faults at least one */
  constructor(faults: readonly RunFileFault[]) {
    const shown = faults.slice(0, MOST_SHOWN).map(faultText);
    const more = faults.length - shown.length;
    super([...shown, ...(more > 0 ? [`… and ${more} more`] : [])].join("\n"));
    this.name = "RunFileError";
    this.faults = faults;
  }

  /** File of the first fault. */
  get file(): string {
    return this.faults[0].file;
  }

  /** Line of the first fault, from 1. */
  get line(): number | undefined {
    return this.faults[0].line;
  }

  /** Column of the first fault, from 1. */
  get column(): number | undefined {
    return this.faults[0].column;
  }

  /** Header of the first fault's column. */
  get header(): string | undefined {
    return this.faults[0].header;
  }

  /** Cell of the first fault. */
  get cell(): string | undefined {
    return this.faults[0].cell;
  }
}

function faultText(fault: RunFileFault): string {
  const place = [
    fault.file,
    ...(fault.line === undefined ? [] : [`line ${fault.line}`]),
    ...(fault.column === undefined
      ? []
      : [`column ${fault.column}${fault.header ? ` (${fault.header})` : ""}`]),
  ].join(", ");
  const cell = fault.cell === undefined ? "" : ` "${fault.cell}":`;
  return `Cannot read ${place}:${cell} ${fault.message}`;
}
