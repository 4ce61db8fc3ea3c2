/** A drawn figure: a standalone SVG picture with words for those who cannot see it.
 *
 * @example
 * ```ts
 * import { ok } from "node:assert";
 * import { linearize, plotLinearizations, Run } from "ratebook";
 *
 * const run = new Run({
 *   id: "1",
 *   times: { values: [0, 10, 20, 40], unit: "s" },
 *   signals: [{ name: "A", unit: "mol/L", values: [0.1, 0.0741, 0.0549, 0.0301] }],
 * });
 * const figure = plotLinearizations([linearize(run, { order: 1 })]);
 * ok(figure.svg().startsWith("<svg") && figure.alt.includes("order 1"));
 * ``` */
export class Figure {
  /** What is seen, in a sentence or two. */
  readonly alt: string;
  readonly #svg: string;

  /** A figure from its markup.
   *
   * @param svg standalone SVG markup @param alt what is seen */
  constructor(svg: string, alt: string) {
    this.#svg = svg;
    this.alt = alt;
  }

  /** The picture as a standalone SVG document. */
  svg(): string {
    return this.#svg;
  }

  /** What is seen. */
  toString(): string {
    return `Figure: ${this.alt}`;
  }

  /** What `console.log` prints. */
  [Symbol.for("Deno.customInspect")](): string {
    return this.toString();
  }

  /** What a notebook shows. */
  [Symbol.for("Jupyter.display")](): Record<string, string> {
    return { "image/svg+xml": this.#svg, "text/plain": this.toString() };
  }
}
