import { Estimate } from "./estimate.ts";
import { formatNumber } from "./number_format.ts";

/** A number with the text that shows it. */
export interface ShownNumber {
  /** The number, for JSON. */
  readonly value: number;
  /** How a reader sees it. */
  readonly text: string;
}

/** One value in a table: an estimate, a number (with its own text or without), words, or nothing. */
export type Cell = Estimate | ShownNumber | number | string | null;

/** A named value of a result. */
export interface Row {
  /** Stable name in the JSON form. */
  readonly key: string;
  /** What a reader sees. */
  readonly label: string;
  /** The value. */
  readonly value: Cell;
  /** Unit of a bare number. */
  readonly unit?: string;
  /** A remark behind the value. */
  readonly note?: string;
}

/** A column of a table. */
export interface Column {
  /** Stable name in the JSON form. */
  readonly key: string;
  /** What a reader sees; the unit belongs in it. */
  readonly label: string;
}

/** A part of a result: named values, a table, an equation, or a sentence. Every view of a result is
 * made from its list of sections. */
export type Section =
  | {
    readonly kind: "values";
    readonly key?: string;
    readonly title?: string;
    readonly rows: readonly Row[];
  }
  | {
    readonly kind: "table";
    readonly key: string;
    readonly title?: string;
    readonly columns: readonly Column[];
    readonly rows: readonly (readonly Cell[])[];
  }
  | {
    readonly kind: "equation";
    readonly key: string;
    readonly latex: string;
    readonly text: string;
  }
  | { readonly kind: "statement"; readonly key: string; readonly text: string };

/** A cell as a reader sees it. */
export function cellText(cell: Cell, unit?: string): string {
  if (cell === null) return "–";
  if (typeof cell === "string") return cell;
  if (typeof cell === "number") {
    const text = Number.isInteger(cell) && Math.abs(cell) < 1e6
      ? String(cell).replace("-", "−")
      : formatNumber(cell, 4);
    return unit && unit !== "1" ? `${text} ${unit}` : text;
  }
  return cell instanceof Estimate ? cell.toString() : cell.text;
}

/** A cell as data: what is not finite becomes `null`. */
export function cellJson(cell: Cell): unknown {
  if (cell instanceof Estimate) return cell.toJSON();
  const value = typeof cell === "object" && cell !== null ? cell.value : cell;
  return typeof value === "number" && !Number.isFinite(value) ? null : value;
}
