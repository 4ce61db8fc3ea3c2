/** Look of all figures: dark on white for print, colours that colour-blind readers can tell apart and
 * that differ in lightness, a symbol and a dash pattern beside each colour so that none is needed. */

/** Fonts that exist on every system, most specific first. */
export const FONT = "Arial, Helvetica, Liberation Sans, sans-serif";

/** Text and axes. */
export const INK = "#1a1a1a";

/** Grid and minor lines. */
export const FAINT = "#d0d0d0";

/** Colours told apart in all common forms of colour blindness, ordered so that neighbours differ in
 * lightness. Source: M. Okabe & K. Ito, Color Universal Design, 2008 (hues; the yellow left out). */
export const COLOURS: readonly string[] = [
  "#0072b2",
  "#d55e00",
  "#009e73",
  "#cc79a7",
  "#56b4e9",
  "#e69f00",
  "#000000",
];

/** Point symbols. Colours, symbols and dashes are 7, 6 and 5, so that series repeat only after 210. */
export const SYMBOLS: readonly string[] = [
  "circle",
  "triangle",
  "square",
  "diamond",
  "star",
  "cross",
];

/** Dash patterns. */
export const DASHES: readonly string[] = ["none", "6,3", "2,3", "8,3,2,3", "10,4"];

/** Entry i of a list that starts again at its end. */
export function cycle<T>(list: readonly T[], i: number): T {
  return list[i % list.length];
}
