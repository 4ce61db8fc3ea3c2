import { expect, test } from "vitest";
import { progressBar } from "../../lib/report/progress_bar.ts";

function stream(terminal: boolean) {
  const text: string[] = [];
  return {
    text,
    isTerminal: () => terminal,
    writeSync: (bytes: Uint8Array) => text.push(new TextDecoder().decode(bytes)),
  };
}

test("a bar by cell on a terminal, wiped at the end", () => {
  const to = stream(true);
  const bar = progressBar(to);
  bar.cellStarted(0, 4, "\nconst a = 1;");
  bar.cellStarted(2, 4, "x".repeat(60));
  bar.finished();
  expect(to.text[0]).toContain("cell 1 of 4  const a = 1;");
  expect(to.text[1]).toContain("[████████████░░░░░░░░░░░░] cell 3 of 4");
  expect(to.text[1]).toMatch(/x{39}…$/);
  expect(to.text[2]).toBe("\r\x1b[K");
});

test("silent elsewhere", () => {
  const to = stream(false);
  const bar = progressBar(to);
  bar.cellStarted(0, 1, "1");
  bar.finished();
  expect(to.text).toEqual([]);
});
