import { afterEach, expect, test } from "vitest";
import { NotebookCellError } from "../../lib/report/run_notebook.ts";
import { writeReport } from "../../lib/report/write_report.ts";
import { notebookFile } from "./notebook_files.ts";

let dispose: (() => Promise<void>) | undefined;
afterEach(async () => {
  await dispose?.();
  dispose = undefined;
});

test("a cell that throws leaves nothing under the report's name, and an earlier report as it was", async () => {
  const good = await notebookFile(["# Good", "1 + 1"]);
  dispose = good.dispose;
  const folder = `${good.folder}/out`;
  const written = await writeReport(good.path, { folder });
  expect([...Deno.readDirSync(folder)].map((f) => f.name).sort()).toEqual([
    "made.html",
    "made.ipynb",
  ]);
  const before = await Deno.readTextFile(written.html);
  await Deno.writeTextFile(
    good.path,
    (await Deno.readTextFile(good.path)).replace("1 + 1", "throw new Error('stop')"),
  );
  const error = await writeReport(good.path, { folder }).catch((e) => e);
  expect(error).toBeInstanceOf(NotebookCellError);
  expect(error.message).toContain(
    `The report ${written.html} is of an earlier run and was left as it was`,
  );
  expect(await Deno.readTextFile(written.html)).toBe(before);
  expect([...Deno.readDirSync(folder)].length).toBe(2);
  const fresh = `${good.folder}/fresh`;
  const alone = await writeReport(good.path, { folder: fresh }).catch((e) => e);
  expect(alone.message).toMatch(/Cell 2/);
  expect(alone.message).not.toMatch(/earlier/);
  await expect(Deno.stat(fresh)).rejects.toBeInstanceOf(Deno.errors.NotFound);
});

test("the notebook itself is never written over", async () => {
  const file = await notebookFile(["1 + 1"]);
  dispose = file.dispose;
  const before = await Deno.readTextFile(file.path);
  await expect(writeReport(file.path, { folder: file.folder })).rejects.toThrow(
    /name another folder/,
  );
  expect(await Deno.readTextFile(file.path)).toBe(before);
  expect([...Deno.readDirSync(file.folder)].length).toBe(1);
});

const PYTHON = "/usr/bin/python3";
const hasNbformat = (() => {
  try {
    const args = ["-c", "import nbformat"];
    return new Deno.Command(PYTHON, { args, stdout: "null", stderr: "null" }).outputSync().success;
  } catch {
    return false;
  }
})();
if (!hasNbformat) {
  console.warn("skipped: nbformat validation, as Debian's python3-nbformat is not here");
}

test.skipIf(!hasNbformat)(
  "the executed notebook is valid nbformat 4.5 by nbformat itself",
  async () => {
    const file = await notebookFile([
      "# Words",
      `console.log("a"); console.error("b");`,
      `import { Estimate } from "ratebook";
     new Estimate({ value: 1, standardError: 0.1, unit: "s" })`,
    ]);
    dispose = file.dispose;
    const written = await writeReport(file.path, { folder: `${file.folder}/out` });
    const script =
      `import nbformat, sys; n = nbformat.read(sys.argv[1], 4); nbformat.validate(n); ` +
      `print(n.nbformat, n.nbformat_minor)`;
    const check = new Deno.Command(PYTHON, { args: ["-c", script, written.notebook] }).outputSync();
    expect(new TextDecoder().decode(check.stderr)).not.toContain("Error");
    expect(new TextDecoder().decode(check.stdout).trim()).toBe("4 5");
  },
);
