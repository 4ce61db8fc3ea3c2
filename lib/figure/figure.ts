/** A figure: a standalone SVG picture with words for those who cannot see it. The plotting library is loaded
 * and the picture drawn when it is first asked for.
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
 * ok((await figure.svg()).startsWith("<svg") && figure.alt.includes("order 1"));
 * ``` */
export class Figure {
  /** What is seen, in a sentence or two. */
  readonly alt: string;
  readonly #draw: () => Promise<string>;
  #svg?: Promise<string>;

  /** A figure that can be drawn.
   *
   * @param draw gives standalone SVG markup @param alt what is seen */
  constructor(draw: () => Promise<string>, alt: string) {
    this.#draw = draw;
    this.alt = alt;
  }

  /** The picture as a standalone SVG document. */
  svg(): Promise<string> {
    return this.#svg ??= this.#draw();
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
  async [Symbol.for("Jupyter.display")](): Promise<Record<string, string>> {
    return { "image/svg+xml": await this.svg(), "text/plain": this.toString() };
  }
}
