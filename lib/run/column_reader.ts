import { commensurable, parseUnit, UnitError } from "../quantity/unit.ts";
import { type Column, readHeader } from "./header.ts";
import { type DecimalMark, decimalMark, type NumberCell, readNumberCell } from "./number_cell.ts";
import { RunFileError, type RunFileFault } from "./run_file_error.ts";
import { placeOf, type Table, type TableRow } from "./table.ts";

/** A table with its columns understood. */
export interface ReadTable {
  /** The table. */
  readonly table: Table;
  /** What each column holds. */
  readonly columns: readonly Column[];
}

/** Understands the headers of a table.
 *
 * @throws {RunFileError} on headers that are empty, twice there, or have a unit that does not fit */
export function readColumns(table: Table): ReadTable {
  const faults: RunFileFault[] = [];
  const columns = table.headers.map((header, i): Column => {
    const place = { file: table.file, line: table.headerLine, column: i + 1, cell: header };
    if (header === "") {
      faults.push({ ...place, message: "the header is empty; name the column" });
    } else if (table.headers.indexOf(header) !== i) {
      faults.push({
        ...place,
        message: "the header stands there twice; name each column differently",
      });
    }
    try {
      return readHeader(header);
    } catch (error) {
      if (!(error instanceof UnitError)) throw error;
      faults.push({
        ...place,
        message: error.message.replace(/^Cannot read the unit "[^"]*": /, ""),
      });
      return { role: "property", name: header };
    }
  });
  columns.forEach((column, i) => {
    const message = repeated(columns, i, table.headers) ?? strayUncertainty(columns, column);
    if (message === undefined) return;
    const [line, cell] = [table.headerLine, table.headers[i]];
    faults.push({ file: table.file, line, column: i + 1, cell, message });
  });
  if (faults.length > 0) throw new RunFileError(faults);
  return { table, columns };
}

/** What a column is about: two columns of one subject contradict each other. */
function subject(column: Column): string | undefined {
  if (column.role === "signal" || column.role === "property") return `name ${column.name}`;
  if (column.role === "initial") return `initial ${column.species}`;
  return column.role === "uncertainty" ? `u ${column.signal}` : undefined;
}

function repeated(
  columns: readonly Column[],
  index: number,
  headers: readonly string[],
): string | undefined {
  const own = subject(columns[index]);
  const first = columns.findIndex((column) => subject(column) === own);
  if (own === undefined || first === index || headers[first] === headers[index]) return undefined;
  return `it is there twice, with different units (the other is "${headers[first]}"); keep one`;
}

function strayUncertainty(columns: readonly Column[], column: Column): string | undefined {
  if (column.role !== "uncertainty") return undefined;
  const signal = columns.find((c) => c.role === "signal" && c.name === column.signal);
  if (signal?.role !== "signal") {
    const names = columns.flatMap((c) => c.role === "signal" ? [`u(${c.name})`] : []);
    return `there is no signal "${column.signal}" with a unit${
      names.length > 0 ? `; write ${names.join(" or ")}` : ""
    }`;
  }
  if (commensurable(parseUnit(column.unit), parseUnit(signal.unit))) return undefined;
  return `${column.unit} does not fit the unit of "${column.signal}", ${signal.unit}`;
}

/** A column of standard uncertainties with its unit. */
export interface UncertaintyColumn {
  /** Which column. */
  readonly index: number;
  /** Its unit. */
  readonly unit: string;
}

/** The column with the standard uncertainties of a signal, if there is one. */
export function uncertaintyColumn(
  columns: readonly Column[],
  signal: string,
): UncertaintyColumn | undefined {
  const index = columns.findIndex((c) => c.role === "uncertainty" && c.signal === signal);
  const column = columns[index];
  return column?.role === "uncertainty" ? { index, unit: column.unit } : undefined;
}

/** Roles whose cells must be numbers. */
const NUMBER_ROLES = new Set<Column["role"]>([
  "time",
  "temperature",
  "initial",
  "uncertainty",
  "signal",
]);

/** Reads the number cells of a table with one decimal mark for the whole file. */
export class NumberReader {
  readonly #table: Table;
  /** Decimal mark of the file. */
  readonly mark: DecimalMark;
  readonly #faults: RunFileFault[] = [];

  /** @param table the table @param columns number columns @param given decimal mark if stated
   * @throws {RunFileError} where the decimal mark cannot be told */
  constructor(
    table: Table,
    columns: readonly number[],
    given?: DecimalMark,
    extra: readonly TableRow[] = [],
  ) {
    this.#table = table;
    const cells = [...extra, ...table.rows].flatMap((row) =>
      columns.map((column) => ({ text: row.cells[column], place: placeOf(table, row, column) }))
    );
    this.mark = decimalMark(cells, given);
  }

  /** A cell; a fault is kept and the cell taken as empty, so that all faults are told at once. */
  read(row: TableRow, column: number): NumberCell {
    try {
      const cell = { text: row.cells[column], place: placeOf(this.#table, row, column) };
      return readNumberCell(cell, this.mark);
    } catch (error) {
      if (!(error instanceof RunFileError)) throw error;
      this.#faults.push(...error.faults);
      return { kind: "empty" };
    }
  }

  /** A cell that must hold a number. */
  required(row: TableRow, column: number): number {
    const cell = this.read(row, column);
    if (cell.kind === "number") return cell.value;
    if (row.cells[column] === "" || cell.kind === "censored") {
      this.fault(row, column, "a number is missing here; write it or delete the row");
    }
    return NaN;
  }

  /** Keeps a fault of a cell. */
  fault(row: TableRow, column: number, message: string): void {
    this.#faults.push({ ...placeOf(this.#table, row, column), message });
  }

  /** Throws all faults kept.
   *
   * @throws {RunFileError} if there are any */
  finish(): void {
    if (this.#faults.length === 0) return;
    const order = (fault: RunFileFault) => (fault.line ?? 0) * 1e6 + (fault.column ?? 0);
    throw new RunFileError(this.#faults.toSorted((a, b) => order(a) - order(b)));
  }
}

/** Indices of the columns whose cells must be numbers. */
export function numberColumns(columns: readonly Column[]): number[] {
  return columns.flatMap((column, i) => NUMBER_ROLES.has(column.role) ? [i] : []);
}

/** The column of time.
 *
 * @throws {RunFileError} if there is none, or several */
export function timeColumnOf(read: ReadTable): number {
  const only = onlyColumn(read, "time");
  if (only !== undefined) return only;
  const { table, columns } = read;
  const likely = columns.findIndex((column) =>
    column.role === "signal" && commensurable(parseUnit(column.unit), parseUnit("s"))
  );
  const unit = likely < 0 ? "min" : (columns[likely] as { unit: string }).unit;
  throw new RunFileError([{
    file: table.file,
    line: table.headerLine,
    message: `there is no time column among ${
      table.headers.map((h) => `"${h}"`).join(", ")
    }; call ` +
      (likely < 0
        ? `it "time [min]" or another unit of time`
        : `"${table.headers[likely]}" "time [${unit}]" if it is one`),
  }]);
}

/** The only column of a role, or `undefined`.
 *
 * @throws {RunFileError} if there are several */
export function onlyColumn(
  { table, columns }: ReadTable,
  role: Column["role"],
): number | undefined {
  const found = columns.flatMap((column, i) => column.role === role ? [i] : []);
  if (found.length < 2) return found[0];
  throw new RunFileError([{
    file: table.file,
    line: table.headerLine,
    column: found[1] + 1,
    cell: table.headers[found[1]],
    message: `there are ${found.length} columns of ${role} (${
      found.map((i) => `"${table.headers[i]}"`).join(", ")
    }); keep one`,
  }]);
}
