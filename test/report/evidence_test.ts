import { describe, expect, test } from "vitest";
import { EVIDENCE_MEDIA_TYPE } from "../../lib/quantity/result.ts";
import { collectEvidence } from "../../lib/report/evidence.ts";
import type { Notebook, NotebookCell, Output } from "../../lib/report/notebook.ts";
import { renderReport } from "../../lib/report/render_report.ts";

function cell(execution_count: number | null, ...outputs: Output[]): NotebookCell {
  return {
    cell_type: "code",
    id: crypto.randomUUID(),
    metadata: {},
    source: "1",
    execution_count,
    outputs,
  };
}

function evidence(content: unknown): Output {
  return { output_type: "display_data", data: { [EVIDENCE_MEDIA_TYPE]: content }, metadata: {} };
}

function notebook(...cells: NotebookCell[]): Notebook {
  return { cells, metadata: {}, nbformat: 4, nbformat_minor: 5 };
}

const caution = { code: "c", severity: "caution", message: "few readings" };

describe("cautions", () => {
  test("are kept once each, with the first cell that raised them, the serious first", () => {
    const serious = { code: "s", severity: "serious", message: "no" };
    const note = { code: "n", severity: "note", message: "by the way" };
    const found = collectEvidence(notebook(
      cell(1, evidence({ cautions: [note, caution] })),
      cell(2, evidence({ cautions: [caution, serious] })),
    ));
    expect(found.cautions.map((c) => [c.code, c.cell])).toEqual([["s", 2], ["c", 1], ["n", 1]]);
  });

  test("about two subjects are two, and each says what it is about", async () => {
    const of = (subject: string) => evidence({ cautions: [{ ...caution, subject }] });
    const made = notebook(cell(1, of("run 7"), of("run 8"), of("run 7")));
    expect(collectEvidence(made).cautions.map((c) => c.subject)).toEqual(["run 7", "run 8"]);
    const page = await renderReport(made);
    expect(page).toContain("run 7: few readings");
    expect(page).toContain("run 8: few readings");
  });

  const codes = (...cells: NotebookCell[]) =>
    collectEvidence(notebook(...cells)).cautions.map((c) => [c.code, c.cell]);
  const error: Output = { output_type: "error", ename: "RangeError", evalue: "no", traceback: [] };

  test.each([
    ["an executed notebook raises none", [cell(1), cell(2), cell(5)], []],
    ["a cell that failed", [cell(1), cell(2, error)], [["cell-failed", 2]]],
    ["a cell that was not executed", [cell(1), cell(null)], [["cell-not-executed", 2]]],
    ["cells in another order", [cell(2), cell(1)], [["execution-order", 2]]],
  ])("of the execution: %s", (_, cells, expected) => {
    expect(codes(...cells)).toEqual(expected);
  });
});

test("sources, seeds and headlines are kept once each", () => {
  const source = { name: "a.csv", sha256: "00", bytes: 3 };
  const content = {
    title: "Fit",
    sources: [source, { ...source, sha256: "01" }],
    seed: 4,
    headlines: [{ label: "k", text: "1 /s" }],
    data: { k: 1 },
  };
  const found = collectEvidence(notebook(cell(1, evidence(content)), cell(2, evidence(content))));
  expect(found.sources.map((s) => s.sha256)).toEqual(["00", "01"]);
  expect(found.seeds).toEqual([4]);
  expect(found.headlines).toEqual([{ cell: 1, title: "Fit", label: "k", text: "1 /s" }]);
  expect(found.results).toEqual([{ cell: 1, data: { k: 1 } }, { cell: 2, data: { k: 1 } }]);
});

test.each([
  ["text", /"text" as the evidence that cell 1 displays/],
  [{ cautions: [{ ...caution, severity: `x" onclick="y` }] }, /severity.*expected one of "note"/],
  [{ cautions: [{ code: "c", severity: "note" }] }, /message is missing/],
  [{ cautions: "none" }, /expected a list/],
  [{ sources: [{ name: "a.csv" }] }, /sha256 is missing/],
  [{ seed: "7" }, /expected a finite number/],
])("what claims to be evidence and is not is refused: %o", (content, message) => {
  expect(() => collectEvidence(notebook(cell(1, evidence(content))))).toThrow(message);
});

test("evidence of a later version may say more", () => {
  expect(collectEvidence(notebook(cell(1, evidence({ novelty: 1, cautions: [caution] })))).cautions)
    .toEqual([{ ...caution, cell: 1 }]);
});
