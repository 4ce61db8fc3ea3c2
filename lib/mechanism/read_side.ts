import type { NotationFault } from "./mechanism_syntax_error.ts";
import type { Participant } from "./elementary_step.ts";

/** One side of a step as read. */
export interface Side {
  readonly participants: readonly Participant[];
  readonly thirdBodies: number;
  readonly light: boolean;
}

const WHOLE_COEFFICIENT = /^(\d+)(?:\s+|(?=[^\s\d.,'’+-]))/;
const OTHER_COEFFICIENT = /^(?:\d*[.,]\d+|\d+\/\d+)(?=\s|[\p{L}([])/u;
const NAME = /^[\p{L}\p{N}\p{M}()[\]{}^_·*'’′″⁺⁻,:.$&~|%@!?/\\#-]$/u;
const DOTS = /[\u2022\u22c5\u2219]/g;

/** Reads one side of a step.
 *
 * A `+` with a space, an end or a phase behind it and a name before it is a charge; any other `+`
 * stands between species.
 *
 * @param text the line
 * @param from first column of the side, from 0
 * @param to column after the side, from 0
 * @param line its number, for the faults
 * @param faults where faults are added */
export function readSide(
  text: string,
  from: number,
  to: number,
  line: number,
  faults: NotationFault[],
): Side {
  const counts = new Map<string, number>();
  let thirdBodies = 0;
  let light = false;
  let empty = false;
  let terms = 0;
  let at = from;
  const fault = (column: number, message: string) =>
    faults.push({ line, column: column + 1, message });
  let expectTerm = true;
  while (true) {
    while (at < to && isSpace(text.charCodeAt(at))) at++;
    if (at >= to) break;
    if (!expectTerm) {
      if (text[at] !== "+") {
        const end = wordEnd(text, at, to);
        fault(
          at,
          `expected "+" or an arrow, found "${text.slice(at, end)}"; write "+" with a ` +
            `space on both sides between species`,
        );
        at = end;
        continue;
      }
      at++;
      expectTerm = true;
      continue;
    }
    if (text[at] === "+") {
      fault(at, `expected a species before "+"; write a name, or leave the "+" out`);
      at++;
      continue;
    }
    const begin = at;
    let coefficient = 1;
    const rest = isCoefficientStart(text.charCodeAt(at)) ? text.slice(at, to) : "";
    if (rest) {
      const whole = WHOLE_COEFFICIENT.exec(rest);
      const other = OTHER_COEFFICIENT.exec(rest);
      if (other) {
        fault(
          at,
          `an elementary step has whole stoichiometric numbers, found "${other[0]}"; ` +
            `multiply the step or split it into elementary steps`,
        );
        at += other[0].length;
      } else if (whole) {
        coefficient = Number(whole[1]);
        if (!(coefficient >= 1 && coefficient <= 1e6)) {
          fault(
            at,
            `expected a stoichiometric number of 1 or more, found "${whole[1]}"; leave ` +
              `the species out or write how many react`,
          );
          coefficient = 1;
        }
        at += whole[0].length;
      }
      while (at < to && isSpace(text.charCodeAt(at))) at++;
    }
    const end = nameEnd(text, at, to);
    if (end === at) {
      const stop = Math.max(at + 1, wordEnd(text, at, to));
      const found = at < to ? `"${text.slice(at, stop)}"` : "nothing";
      fault(Math.min(at, to), `expected the name of a species, found ${found}`);
      at = stop;
      expectTerm = false;
      terms++;
      continue;
    }
    const name = canonicalName(text.slice(at, end));
    at = end;
    expectTerm = false;
    terms++;
    if (name === "∅") empty = true;
    else if (name === "M") thirdBodies += coefficient;
    else if (name === "hν" || name === "hv") light = true;
    else counts.set(name, (counts.get(name) ?? 0) + coefficient);
    if (coefficient !== 1 && (name === "∅" || name === "hν" || name === "hv")) {
      fault(
        begin,
        `"${name}" takes no stoichiometric number, found "${coefficient}"; leave it out`,
      );
    }
  }
  if (terms === 0) {
    fault(
      Math.min(from, text.length),
      `expected a species, found an empty side; write ∅ for a source or a loss`,
    );
  } else if (expectTerm) {
    fault(to, `expected a species after "+", found nothing; write a name, or leave the "+" out`);
  }
  if (empty && terms > 1) {
    fault(
      from,
      `expected ∅ alone on its side, found it beside species; leave ∅ or the species out`,
    );
  }
  const participants = Array.from(counts, ([species, coefficient]) => ({ species, coefficient }));
  return { participants, thirdBodies, light };
}

/** Radical dots, minus signs and composed letters in one spelling, so that a species has one name. */
function canonicalName(name: string): string {
  if (/^[\x21-\x7e]+$/.test(name)) return name;
  return name.normalize("NFC").replace(DOTS, "·").replaceAll("−", "-");
}

function isSpace(code: number): boolean {
  return code === 32 || code === 9 || code === 13 || code === 0xa0 || code === 0x2009 ||
    code === 0x202f;
}

function isCoefficientStart(code: number): boolean {
  return code >= 48 && code <= 57 || code === 46;
}

function wordEnd(text: string, at: number, to: number): number {
  while (at < to && !isSpace(text.charCodeAt(at))) at++;
  return at;
}

function nameEnd(text: string, from: number, to: number): number {
  let at = from;
  while (at < to) {
    const code = text.charCodeAt(at);
    if (code >= 48 && code <= 57 || code >= 65 && code <= 90 || code >= 97 && code <= 122) {
      at++;
    } else if (code === 43) { // "+"
      if (at === from || !isCharge(text, at, to)) break;
      at++;
    } else if (code === 0x2205) { // "∅"
      return at === from ? at + 1 : at;
    } else if (
      code === 0x2022 || code === 0x22c5 || code === 0x2219 || code === 0x2212 ||
      NAME.test(String.fromCodePoint(text.codePointAt(at)!))
    ) {
      at += text.codePointAt(at)! > 0xffff ? 2 : 1;
    } else break;
  }
  return at;
}

/** Whether the "+" at a place directly behind a name is its charge. */
function isCharge(text: string, at: number, to: number): boolean {
  const next = at + 1;
  if (next >= to || isSpace(text.charCodeAt(next))) return true;
  const c = text[next];
  return c === "+" || c === ")" || c === "]" || c === "}" || c === "*" ||
    (c === "(" && /^\((?:aq|g|l|s|cr|ads|sol|org)\)/.test(text.slice(next, next + 5)));
}
