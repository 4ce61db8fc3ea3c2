import { describe, expect, test } from "vitest";
import { importsOf, libraryFiles, roomOf } from "./source.ts";

/** What each room of lib/ may import besides itself. */
const ROOMS: Readonly<Record<string, readonly string[]>> = (() => {
  const quantity: string[] = [];
  const statistics = ["quantity"];
  const run = [...statistics, "statistics"];
  const rate_law = [...run, "run"];
  const temperature = [...rate_law, "rate_law"];
  const mechanism = ["quantity"];
  const simulation = [...mechanism, "mechanism"];
  const estimation = ["quantity", "statistics", "run", "mechanism", "simulation"];
  const figure = [...temperature, "temperature", "mechanism", "simulation", "estimation"];
  const report = [...figure, "figure"];
  const cli = [...report, "report"];
  return {
    quantity,
    statistics,
    run,
    rate_law,
    temperature,
    mechanism,
    simulation,
    estimation,
    figure,
    report,
    cli,
  };
})();

const files = libraryFiles();

test("there is something to look at", () => {
  expect(files.length).toBeGreaterThan(10);
  expect(files.flatMap((file) => file.imports).length).toBeGreaterThan(files.length);
});

describe("imports are found", () => {
  test.each([
    [`import { a } from "./b.ts";`, ["lib/x/b.ts"]],
    [`import {\n  a,\n} from "../y/b.ts";`, ["lib/y/b.ts"]],
    [`import type { A } from "../y/b.ts";`, ["lib/y/b.ts"]],
    [`export * from "./b.ts";`, ["lib/x/b.ts"]],
    [`import "./b.ts";`, ["lib/x/b.ts"]],
    [`const b = await import("./b.ts");`, ["lib/x/b.ts"]],
    [`import q from "js-quantities";`, ["js-quantities"]],
    [`/** import { a } from "./b.ts"; */`, []],
    [`  // import { a } from "./b.ts";`, []],
  ])("%s", (text, expected) => {
    expect(importsOf("lib/x/a.ts", text)).toEqual(expected);
  });
});

test("every file of lib/ is in a room, and every room is known", () => {
  const strays = files.filter((file) => !(roomOf(file.path) in ROOMS)).map((file) => file.path);
  expect(strays).toEqual([]);
});

test("data walks down the rooms and never back up", () => {
  const wrong = files.flatMap((file) =>
    file.imports
      .filter((path) => path.startsWith("lib/") && roomOf(path) !== roomOf(file.path))
      .filter((path) => !ROOMS[roomOf(file.path)]?.includes(roomOf(path)))
      .map((path) => `${file.path} imports ${path}`)
  );
  expect(wrong).toEqual([]);
});

test("no file of lib/ imports the entry, or a file outside lib/", () => {
  const wrong = files.flatMap((file) =>
    file.imports
      .filter((path) => path === "ratebook" || /\.(ts|js|json)$/.test(path))
      .filter((path) => !path.startsWith("lib/"))
      .map((path) => `${file.path} imports ${path}`)
  );
  expect(wrong).toEqual([]);
});

test("no file reaches itself through its imports", () => {
  const importsByPath = new Map(files.map((file) => [file.path, file.imports]));
  const done = new Set<string>();
  const cycles: string[] = [];
  const visit = (path: string, trail: readonly string[]): void => {
    const at = trail.indexOf(path);
    if (at >= 0) {
      cycles.push([...trail.slice(at), path].join(" → "));
      return;
    }
    if (done.has(path)) return;
    for (const next of importsByPath.get(path) ?? []) visit(next, [...trail, path]);
    done.add(path);
  };
  for (const file of files) visit(file.path, []);
  expect(cycles).toEqual([]);
});
