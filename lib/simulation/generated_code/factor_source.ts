import type { JacobianStructure } from "../jacobian_structure.ts";
import { literal } from "./source_text.ts";

/** Statements that factor d I − J, entries of the factors in `L`, reciprocal pivots in `P`; they end
 * in `return` of whether every pivot is a number. Values live in constants and variables, so that
 * the whole is straight-line arithmetic. */
export function factorStatements(structure: JacobianStructure): string[] {
  const { size, rowStart, column, diagonal, place, sums, sumOf } = structure;
  const statements: string[] = [];
  const own = new Int32Array(column.length).fill(-1);
  for (let q = 0; q < place.length; q++) if (place[q] >= 0) own[place[q]] = q;
  const slot = new Int32Array(size);
  for (let i = 0; i < size; i++) {
    const set = new Uint8Array(rowStart[i + 1] - rowStart[i]);
    for (let p = rowStart[i]; p < rowStart[i + 1]; p++) {
      slot[column[p]] = p;
      const q = own[p];
      const sum = sumOf[i] < 0 ? undefined : sums[sumOf[i]];
      const value = sum
        ? column[p] === i ? "1" : literal(-(sum.weights[sum.species.indexOf(column[p])] ?? 0))
        : column[p] === i
        ? (q < 0 ? "d" : `d - J[${q}]`)
        : q < 0
        ? "0"
        : `-J[${q}]`;
      if (value !== "0" && value !== "-0") {
        statements.push(`let a${p} = ${value};`);
        set[p - rowStart[i]] = 1;
      }
    }
    for (let p = rowStart[i]; p < diagonal[i]; p++) {
      const k = column[p];
      statements.push(`a${p} *= p${k};`, `L[${p}] = a${p};`);
      for (let u = diagonal[k] + 1; u < rowStart[k + 1]; u++) {
        const t = slot[column[u]];
        if (set[t - rowStart[i]] === 1) statements.push(`a${t} -= a${p} * a${u};`);
        else {
          statements.push(`let a${t} = -a${p} * a${u};`);
          set[t - rowStart[i]] = 1;
        }
      }
    }
    statements.push(`const p${i} = 1 / a${diagonal[i]};`, `P[${i}] = p${i};`);
    for (let p = diagonal[i] + 1; p < rowStart[i + 1]; p++) statements.push(`L[${p}] = a${p};`);
  }
  const all = Array.from({ length: size }, (_, i) => `p${i}`);
  // a product with 0 is NaN for a pivot that is infinite or NaN
  statements.push(`return 0 * (${all.join(" + ")}) === 0;`);
  return statements;
}

/** Statements that solve L U x = b in the variables `b0`, `b1` …. */
export function solveStatements(structure: JacobianStructure): string[] {
  const { size, rowStart, column, diagonal } = structure;
  const statements: string[] = [];
  for (let i = 0; i < size; i++) {
    let text = "";
    for (let p = rowStart[i]; p < diagonal[i]; p++) text += ` - L[${p}] * b${column[p]}`;
    if (text !== "") statements.push(`b${i} = b${i}${text};`);
  }
  for (let i = size - 1; i >= 0; i--) {
    let text = "";
    for (let p = diagonal[i] + 1; p < rowStart[i + 1]; p++) text += ` - L[${p}] * b${column[p]}`;
    statements.push(text === "" ? `b${i} *= P[${i}];` : `b${i} = (b${i}${text}) * P[${i}];`);
  }
  return statements;
}
