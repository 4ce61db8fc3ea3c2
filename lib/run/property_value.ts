import { type DecimalMark, readNumber } from "./number_cell.ts";

/** How the cells of a column without a unit are taken: as numbers if every one is a number and none loses
 * figures that tell it from another (batch 007, versions 1.1 and 1.10), else as they stand.
 *
 * @param cells cells of the column @param mark decimal mark of the file */
export function propertyReader(
  cells: readonly string[],
  mark: DecimalMark,
): (cell: string) => string | number {
  const texts = [...new Set(cells.filter((cell) => cell !== ""))];
  const numbers = texts.map((text) =>
    /^[+\-−]?0\d/.test(text) ? undefined : readNumber(text, mark)
  );
  const tellApart = new Set(numbers).size === texts.length &&
    texts.every((text) => text.replaceAll(/\D/g, "").length <= 15);
  if (!tellApart || numbers.includes(undefined)) return (cell) => cell;
  const values = new Map(texts.map((text, i) => [text, numbers[i]!]));
  return (cell) => values.get(cell) ?? cell;
}
