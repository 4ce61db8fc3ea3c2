import { describe, expect, test } from "vitest";
import { formatNotebook, parseNotebook } from "../../lib/report/notebook.ts";

const text = (cells: unknown[], rest = {}) =>
  JSON.stringify({ nbformat: 4, nbformat_minor: 5, metadata: { a: 1 }, cells, ...rest });

const code = {
  cell_type: "code",
  id: "a",
  metadata: {},
  source: ["1\n", "2"],
  execution_count: 3,
  outputs: [],
};

test("a notebook comes back as it was", () => {
  const raw = { cell_type: "raw", id: "b", metadata: {}, source: "x" };
  const words = {
    cell_type: "markdown",
    id: "c",
    metadata: { tags: ["t"] },
    source: "y",
    attachments: {},
  };
  const file = text([code, raw, words]);
  expect(JSON.parse(formatNotebook(parseNotebook(file, "n")))).toEqual(JSON.parse(file));
});

test("cells of older minor versions get ids", () => {
  const { id: _, ...old } = code;
  const read = parseNotebook(text([old, old], { nbformat_minor: 2 }), "n");
  expect(read.nbformat_minor).toBe(5);
  expect(read.cells.map((cell) => cell.id)).toEqual(["cell-1", "cell-2"]);
});

describe("a file is refused, with its name and the place,", () => {
  test.each([
    ["that is not JSON", "time,A", /n\.ipynb: it is not JSON/],
    ["of another version", `{"nbformat":3}`, /expected nbformat 4 with cells, got nbformat 3/],
    [
      "with a cell of no known type",
      text([{ ...code, cell_type: "x" }]),
      /cell 1 has the type "x"/,
    ],
    ["with ids that are the same", text([code, code]), /two cells have the same id/],
    [
      "with an id that the format does not allow",
      text([{ ...code, id: "a b" }]),
      /cell 1 has the id "a b"/,
    ],
    ["with a source that is no text", text([{ ...code, source: 7 }]), /source of cell 1/],
  ])("%s", (_, file, message) => {
    expect(() => parseNotebook(file, "n.ipynb")).toThrow(message);
  });
});
