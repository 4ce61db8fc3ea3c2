import type { ElementaryStep } from "./elementary_step.ts";
import { Mechanism } from "./mechanism.ts";
import { MechanismSyntaxError, type NotationFault } from "./mechanism_syntax_error.ts";
import { type Arrow, readArrow } from "./read_arrow.ts";
import { readSide, type Side } from "./read_side.ts";

/** Most particles that may meet in one elementary step. */
const MOST_MOLECULARITY = 3;

/** Reads a mechanism, one elementary step a line.
 *
 * Arrows are `->` or `→` (one way) and `<=>` or `⇌` (both ways); rate-constant symbols stand in
 * brackets directly behind the arrow, `A <=>[k1][k-1] B`, and are k1, k-1, k2 … in order where they
 * are left out. An empty side is `∅`, `M` is a third body, `hν` or `hv` is light, and `#` begins a
 * comment. A symbol written on several steps is one rate constant.
 *
 * Source: the arrows with text in brackets are those of the mhchem notation for LaTeX (M. Hensel).
 * @param text the steps
 * @returns the mechanism
 * @throws {TypeError} if `text` is no text
 * @throws {MechanismSyntaxError} with every fault, each with its line, column and fix
 * @example Two steps
 * ```ts
 * import { deepStrictEqual } from "node:assert";
 * import { parseMechanism } from "ratebook";
 *
 * const chain = parseMechanism("X2 <=>[k1][k-1] 2 X\nX + RH ->[k2] HX + R");
 * deepStrictEqual(chain.species, ["X2", "X", "RH", "HX", "R"]);
 * deepStrictEqual(chain.rateConstants, ["k1", "k-1", "k2"]);
 * ``` */
export function parseMechanism(text: string): Mechanism {
  if (typeof text !== "string") {
    throw new TypeError(
      `Cannot parse a mechanism from ${String(text)}: expected text, one step a line`,
    );
  }
  const faults: NotationFault[] = [];
  const steps: ElementaryStep[] = [];
  const written = new Map<string, number>();
  const automatic = new Map<string, { step: number; line: number; column: number }>();
  const lines = text.split(/\r\n|\n|\r/);
  for (let i = 0; i < lines.length; i++) {
    const end = commentStart(lines[i]);
    if (lines[i].slice(0, end).trim() === "") continue;
    const number = steps.length + 1;
    const found = faults.length;
    const read = readStep(lines[i], end, i + 1, faults);
    if (!read) continue;
    const { arrow, left, right } = read;
    const names = arrow.reversible ? [`k${number}`, `k-${number}`] : [`k${number}`];
    const symbols = names.map((name, direction) => {
      const symbol = arrow.symbols[direction]?.text;
      if (symbol) {
        if (!written.has(symbol)) written.set(symbol, number);
        return symbol;
      }
      automatic.set(name, { step: number, line: i + 1, column: arrow.from + 1 });
      return name;
    });
    steps.push({
      number,
      line: i + 1,
      reactants: left.participants,
      products: right.participants,
      rateConstant: symbols[0],
      reverseRateConstant: symbols[1],
      thirdBody: left.thirdBodies > 0,
      light: left.light ? "absorbed" : right.light ? "emitted" : undefined,
    });
    if (faults.length === found) {
      checkStep(steps[steps.length - 1], left, right, arrow, faults);
    }
  }
  for (const [symbol, at] of automatic) {
    const other = written.get(symbol);
    if (other !== undefined && other !== at.step) {
      faults.push({
        line: at.line,
        column: at.column,
        message:
          `step ${at.step} has no symbol and would be "${symbol}", which is written on step ` +
          `${other}; write a symbol on step ${at.step}`,
      });
    }
  }
  if (steps.length === 0 && faults.length === 0) {
    faults.push({
      line: 1,
      column: 1,
      message: `expected an elementary step such as "A -> B", found none`,
    });
  }
  if (faults.length > 0) {
    throw new MechanismSyntaxError(faults.sort((a, b) => a.line - b.line || a.column - b.column));
  }
  return new Mechanism(steps);
}

function readStep(
  text: string,
  end: number,
  line: number,
  faults: NotationFault[],
): { arrow: Arrow; left: Side; right: Side } | undefined {
  const arrow = readArrow(text, end, line, faults);
  if (!arrow) return undefined;
  const left = readSide(text, 0, arrow.from, line, faults);
  const right = readSide(text, arrow.to, end, line, faults);
  return { arrow, left, right };
}

function checkStep(
  step: ElementaryStep,
  left: Side,
  right: Side,
  arrow: Arrow,
  faults: NotationFault[],
): void {
  const fault = (message: string) =>
    faults.push({ line: step.line, column: arrow.from + 1, message });
  if (left.thirdBodies !== right.thirdBodies || left.thirdBodies > 1) {
    fault(
      `expected the third body M once on both sides, found ${left.thirdBodies} on the left and ` +
        `${right.thirdBodies} on the right; write "+ M" on both, or name the species that reacts`,
    );
  }
  if (left.light && right.light) {
    fault(`expected light on one side, found it on both; leave one out`);
  }
  if (step.light && arrow.reversible) {
    fault(`a step with light runs one way; write "->", and the way back as a step of its own`);
  }
  const sides = arrow.reversible ? [left, right] : [left];
  for (const side of sides) {
    const count = side.participants.reduce((sum, p) => sum + p.coefficient, side.thirdBodies);
    if (count > MOST_MOLECULARITY) {
      fault(
        `at most ${MOST_MOLECULARITY} particles react in one elementary step, found ${count}; ` +
          `split it into elementary steps`,
      );
    }
  }
  if (left.participants.length === 0 && right.participants.length === 0) {
    fault(`expected a species on one side at least, found none`);
  } else if (sameSide(left, right)) {
    fault(`both sides are the same, so the step changes nothing; leave it out or mend a side`);
  }
}

function sameSide(left: Side, right: Side): boolean {
  return left.participants.length === right.participants.length &&
    left.participants.every((p) =>
      right.participants.some((q) => q.species === p.species && q.coefficient === p.coefficient)
    );
}

/** Where the comment begins: a "#" at the start or behind a space; the length where there is none. */
function commentStart(line: string): number {
  for (let at = line.indexOf("#"); at >= 0; at = line.indexOf("#", at + 1)) {
    if (at === 0 || /\s/.test(line[at - 1])) return at;
  }
  return line.length;
}

/** A mechanism written in place, read by {@link parseMechanism}; values in `${…}` are put in as text.
 *
 * @param strings the pieces of text
 * @param values what stands between them
 * @returns the mechanism
 * @throws {MechanismSyntaxError} with every fault, each with its line, column and fix
 * @example Consecutive steps
 * ```ts
 * import { strictEqual } from "node:assert";
 * import { mechanism } from "ratebook";
 *
 * const consecutive = mechanism`
 *   A ->[k1] B
 *   B ->[k2] C   # slow
 * `;
 * strictEqual(consecutive.steps[1].rateConstant, "k2");
 * ``` */
export function mechanism(
  strings: TemplateStringsArray,
  ...values: readonly unknown[]
): Mechanism {
  return parseMechanism(String.raw(strings, ...values.map(String)));
}
