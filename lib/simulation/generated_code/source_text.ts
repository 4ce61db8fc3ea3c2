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
