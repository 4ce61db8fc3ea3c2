import type { NotationFault } from "./mechanism_syntax_error.ts";

/** The arrow of a step as read: where it stands, and the symbols written on it. */
export interface Arrow {
  readonly from: number;
  readonly to: number;
  readonly reversible: boolean;
  readonly symbols: readonly { readonly text: string; readonly column: number }[];
}

const ARROW = /<=>|<->|<-->|<=+>|--+>|->|→|⇌|⇋|⇄|⇆|↔|=>|=+|←|<-+/g;
const FORWARD = new Set(["->", "→"]);
const REVERSIBLE = new Set(["<=>", "⇌"]);
const SYMBOL = /^[\p{L}][\p{L}\p{N}\p{M}_.,'′*+\-−−^{}()₀-₉ᵢ‡≠]*$/u;

/** Finds the arrow of a step and the rate-constant symbols in brackets directly behind it.
 *
 * @returns the arrow, or undefined where there is none (a fault is added) */
export function readArrow(
  text: string,
  end: number,
  line: number,
  faults: NotationFault[],
): Arrow | undefined {
  const fault = (column: number, message: string) =>
    faults.push({ line, column: column + 1, message });
  const found = scan(text, end);
  if (found.length === 0) {
    const start = text.search(/\S/);
    fault(
      start,
      `expected an arrow, found none in "${text.slice(start, end).trim()}"; write ` +
        `"->" for a step that runs one way or "<=>" for one that runs both ways`,
    );
    return undefined;
  }
  const first = found[0];
  let reversible = REVERSIBLE.has(first.text);
  if (!reversible && !FORWARD.has(first.text)) {
    fault(
      first.at,
      `expected "->" or "<=>", found "${first.text}"; write "->" for a step that ` +
        `runs one way or "<=>" for one that runs both ways`,
    );
    reversible = /^</.test(first.text) && /[>]$/.test(first.text) || /[⇋⇄⇆↔]/.test(first.text);
  }
  let to = first.at + first.text.length;
  const symbols: { text: string; column: number }[] = [];
  while (to < end && text[to] === "[") {
    const close = text.indexOf("]", to);
    if (close < 0 || close >= end) {
      fault(
        to,
        `expected "]" behind the rate-constant symbol, found the end of the line; close ` +
          `the bracket, or put a space between the arrow and a species that begins with "["`,
      );
      to = end;
      break;
    }
    const symbol = text.slice(to + 1, close).trim();
    if (SYMBOL.test(symbol)) {
      symbols.push({ text: symbol.replaceAll("−", "-"), column: to + 1 });
    } else {
      fault(
        to + 1,
        `expected a rate-constant symbol such as k1, found "${symbol}"; values belong ` +
          `to the rateConstants option, and a species that begins with "[" needs a space before it`,
      );
      symbols.push({ text: "", column: to + 1 });
    }
    to = close + 1;
  }
  const most = reversible ? 2 : 1;
  if (symbols.length > most) {
    fault(
      symbols[most].column,
      reversible
        ? `expected two rate-constant symbols, found ${symbols.length}; leave "[${
          symbols[most].text
        }]" out`
        : `expected one rate-constant symbol on "->", found ${symbols.length}; leave ` +
          `"[${symbols[most].text}]" out, or write "<=>" for a step that runs both ways`,
    );
  } else if (reversible && symbols.length === 1) {
    fault(
      symbols[0].column,
      `expected two rate-constant symbols on a reversible arrow, found one; ` +
        `write "<=>[${symbols[0].text || "k1"}][k-1]" with a symbol for the reverse direction`,
    );
  }
  if (found.length > 1) {
    fault(
      found[1].at,
      `expected one arrow, found a second one "${found[1].text}"; write one ` +
        `elementary step a line`,
    );
  }
  return { from: first.at, to, reversible, symbols };
}

function scan(text: string, end: number): { at: number; text: string }[] {
  const found: { at: number; text: string }[] = [];
  ARROW.lastIndex = 0;
  for (let match = ARROW.exec(text); match && match.index < end; match = ARROW.exec(text)) {
    let arrow = match[0];
    let at = match.index;
    // Br--> : the first "-" is a charge when it stands directly behind a name
    if (/^--+>$/.test(arrow) && at > 0 && /\S/.test(text[at - 1])) {
      at += arrow.length - 2;
      arrow = "->";
    }
    found.push({ at, text: arrow });
  }
  return found;
}
