/** Statements a function may hold before it is split: V8 leaves a function of more than 60 KB of
 * bytecode unoptimised, and a statement such as `a[1] -= a[2] * a[3]` takes some 25 bytes. */
const MOST_STATEMENTS = 1200;

/** A number as JavaScript source. */
export function literal(value: number): string {
  return Object.is(value, -0) ? "-0" : value < 0 ? `(${value})` : String(value);
}

/** A sum of products `factor · text` as source, `0` where there is none. */
export function sum(terms: readonly (readonly [factor: number, text: string])[]): string {
  if (terms.length === 0) return "0";
  let out = "";
  for (const [factor, text] of terms) {
    const size = Math.abs(factor);
    const product = size === 1 ? text : `${size} * ${text}`;
    if (out === "") out = factor < 0 ? `-${product}` : product;
    else out += factor < 0 ? ` - ${product}` : ` + ${product}`;
  }
  return out;
}

/** A function of independent statements, split into several where it would be too long to be optimised. */
export function functionText(name: string, parameters: string, statements: string[]): string {
  if (statements.length <= MOST_STATEMENTS) {
    return `function ${name}(${parameters}) {\n${statements.join("\n")}\n}\n`;
  }
  const parts: string[] = [];
  const calls: string[] = [];
  for (let from = 0, part = 0; from < statements.length; from += MOST_STATEMENTS, part++) {
    const body = statements.slice(from, from + MOST_STATEMENTS).join("\n");
    parts.push(`function ${name}_${part}(${parameters}) {\n${body}\n}\n`);
    calls.push(`${name}_${part}(${parameters});`);
  }
  return `${parts.join("")}function ${name}(${parameters}) {\n${calls.join("\n")}\n}\n`;
}
