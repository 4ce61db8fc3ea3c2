import { expect, test } from "vitest";
import { libraryFiles, withoutComments } from "./source.ts";

const files = libraryFiles();
const MOST_LINES = 400;

test("a file is named after its idea, in snake case", () => {
  const paths = files.map((file) => file.path);
  expect(paths.filter((path) => /(^|\/)(utils?|helpers?|types|common|misc)\.ts$/.test(path)))
    .toEqual([]);
  expect(paths.filter((path) => !/^lib(\/[a-z][a-z0-9_]*)+\.ts$/.test(path))).toEqual([]);
});

test(`no file is longer than ${MOST_LINES} lines`, () => {
  const long = files
    .map((file) => ({ path: file.path, lines: file.text.split("\n").length - 1 }))
    .filter(({ lines }) => lines > MOST_LINES)
    .map(({ path, lines }) => `${path}: ${lines}`);
  expect(long).toEqual([]);
});

test("an error says by its class what kind it is", () => {
  const plain = files.flatMap((file) =>
    withoutComments(file.text).split("\n").flatMap((line, i) =>
      /\bnew Error\(|\bthrow Error\(|\breject\(["'`]/.test(line)
        ? [`${file.path}:${i + 1}: ${line.trim()}`]
        : []
    )
  );
  expect(plain).toEqual([]);
});
