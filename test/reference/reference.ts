/** A file of this folder, read once.
 *
 * @param name file name, such as `norris.json` */
export function reference<T>(name: string): T {
  return JSON.parse(Deno.readTextFileSync(new URL(name, import.meta.url))) as T;
}

/** Correct decimal digits of a figure against a reference: −log₁₀ of the relative error, 15 at most,
 * of the absolute error where the reference is 0. */
export function correctDigits(figure: number, expected: number): number {
  const error = expected === 0 ? Math.abs(figure) : Math.abs(figure / expected - 1);
  if (!Number.isFinite(figure)) return -Infinity;
  return error === 0 ? 15 : Math.min(15, -Math.log10(error));
}
