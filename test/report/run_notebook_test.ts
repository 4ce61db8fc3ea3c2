import { afterEach, describe, expect, test } from "vitest";
import { KernelError } from "../../lib/report/kernel.ts";
import { joinText, type Notebook, type Output } from "../../lib/report/notebook.ts";
import { NotebookCellError, runNotebook } from "../../lib/report/run_notebook.ts";
import { notebookFile } from "./notebook_files.ts";

let dispose: (() => Promise<void>) | undefined;
afterEach(async () => {
  await dispose?.();
  dispose = undefined;
});

async function written(cells: readonly string[]): Promise<string> {
  const file = await notebookFile(cells);
  dispose = file.dispose;
  return file.path;
}

function outputs(notebook: Notebook, cell: number): readonly Output[] {
  const found = notebook.cells[cell];
  if (found.cell_type !== "code") throw new TypeError(`cell ${cell} is ${found.cell_type}`);
  return found.outputs;
}

function text(output: Output): string {
  return output.output_type === "stream"
    ? joinText(output.text)
    : output.output_type === "error"
    ? output.ename
    : String(output.data["text/plain"]);
}

describe("every output is kept", () => {
  test("60 displays, 200 lines, a value after a top-level await: ten runs in a row", async () => {
    const path = await written([
      `for (let i = 0; i < 60; i++) {
         await Deno.jupyter.display({ "text/plain": "display " + i }, { raw: true });
       }`,
      `for (let i = 0; i < 200; i++) console.log("line", i);`,
      `const later = await new Promise((resolve) => setTimeout(() => resolve(42), 5));
       later`,
      `for (let i = 0; i < 60; i++) Deno.jupyter.display({ "text/plain": "d" + i }, { raw: true });
       for (let i = 0; i < 200; i++) console.log(i);
       later + 1`,
    ]);
    for (let run = 0; run < 10; run++) {
      const executed = await runNotebook(path);
      const displays = outputs(executed, 0).map(text).filter((t) => t.startsWith("display"));
      expect(displays).toEqual(Array.from({ length: 60 }, (_, i) => `display ${i}`));
      expect(outputs(executed, 1).map(text).join("")).toBe(
        Array.from({ length: 200 }, (_, i) => `line ${i}\n`).join(""),
      );
      expect(outputs(executed, 2).map(text)).toEqual([expect.stringContaining("42")]);
      const mixed = outputs(executed, 3).map(text);
      expect(mixed.filter((t) => /^d\d+$/.test(t))).toEqual(
        Array.from({ length: 60 }, (_, i) => `d${i}`),
      );
      expect(mixed.slice(0, -1).join("").replaceAll(/d\d+/g, "")).toBe(
        Array.from({ length: 200 }, (_, i) => `${i}\n`).join(""),
      );
      expect(mixed.at(-1)).toContain("43");
    }
  });

  test("streams are told apart, updates and clearing are obeyed", async () => {
    const path = await written([
      `console.log("out"); console.error("err"); console.log("again");`,
      `await Deno.jupyter.broadcast("display_data",
         { data: { "text/plain": "old" }, metadata: {}, transient: { display_id: "x" } });`,
      `await Deno.jupyter.broadcast("update_display_data",
         { data: { "text/plain": "new" }, metadata: {}, transient: { display_id: "x" } });`,
      `console.log("gone"); await Deno.jupyter.broadcast("clear_output", { wait: true });
       console.log("stays");`,
    ]);
    const executed = await runNotebook(path);
    expect(outputs(executed, 0).map((o) => o.output_type === "stream" ? [o.name, o.text] : o))
      .toEqual([["stdout", "out\n"], ["stderr", "err\n"], ["stdout", "again\n"]]);
    expect(outputs(executed, 1).map(text)).toEqual(["new"]);
    expect(outputs(executed, 3).map(text)).toEqual(["stays\n"]);
  });

  test("cells see the names of earlier ones, and the library by its name", async () => {
    const path = await written([
      `import { readQuantity } from "ratebook"; const kelvin = readQuantity("25 °C", "K", "T");`,
      `kelvin`,
    ]);
    expect(text(outputs(await runNotebook(path), 1)[0])).toContain("298.15");
  });
});

describe("what stops a notebook", () => {
  test("a cell that throws, with its number, its source and the message", async () => {
    const path = await written([
      "# A heading",
      `console.log("before");`,
      `throw new RangeError("no good: 7");`,
      `console.log("never");`,
    ]);
    const error = await runNotebook(path).catch((e) => e);
    expect(error).toBeInstanceOf(NotebookCellError);
    expect(error.cell).toBe(3);
    expect([error.ename, error.evalue]).toEqual(["RangeError", "no good: 7"]);
    expect(error.traceback[0]).toBe("RangeError: no good: 7");
    expect(error.message).toContain("RangeError: no good: 7");
    expect(error.message).toContain("| throw new RangeError");
    expect(text(outputs(error.partial, 1)[0])).toBe("before\n");
    expect(outputs(error.partial, 2)[0].output_type).toBe("error");
    expect(outputs(error.partial, 3)).toEqual([]);
  });

  test.each([
    ["asks for input", `prompt("name?")`, /asks for input \("name\?"\).*write the value/],
    ["does not compile", `const = 5`, /does not compile.*syntax error/],
    [
      "broadcasts what no notebook can hold",
      `await Deno.jupyter.broadcast("display_data", { metadata: {} })`,
      /display_data was broadcast with undefined as its data/,
    ],
    [
      "takes away the way to follow its outputs",
      `Deno.jupyter.broadcast = () => { throw new TypeError("mine"); };`,
      /TypeError: mine/,
    ],
  ])("a cell that %s", async (_, source, message) => {
    const path = await written([source]);
    const error = await runNotebook(path).catch((e) => e);
    expect(error).toBeInstanceOf(NotebookCellError);
    expect(error.message).toMatch(message);
  });

  test("a cell that runs too long", async () => {
    const path = await written([`while (true) {}`]);
    await expect(runNotebook(path, { cellTimeout: 0.5 })).rejects.toThrow(
      /Cell 1.*longer than 0\.5 s/,
    );
  });

  test("a kernel that ends by itself", async () => {
    const path = await written([`console.log(1); Deno.exit(3);`]);
    const error = await runNotebook(path).catch((e) => e);
    expect(error).toBeInstanceOf(KernelError);
    expect(error.message).toMatch(/ended by itself \(exit code 3\)[^]*\| console\.log/);
  });

  test("an abort while the kernel starts", async () => {
    const path = await written([`1`]);
    const signal = AbortSignal.timeout(1);
    const error = await runNotebook(path, { signal }).catch((e) => e);
    expect(error.name).toBe("TimeoutError");
  });

  test("an abort while a cell runs", async () => {
    const stop = new AbortController();
    const path = await written([`await new Promise((resolve) => setTimeout(resolve, 60_000));`]);
    const progress = { cellStarted: () => setTimeout(() => stop.abort(), 50), finished() {} };
    const error = await runNotebook(path, { signal: stop.signal, progress }).catch((e) => e);
    expect(error.name).toBe("AbortError");
  });

  test("a file that is no notebook", async () => {
    const path = await written([]);
    await Deno.writeTextFile(path, `{"nbformat": 3}`);
    await expect(runNotebook(path)).rejects.toThrow(/made\.ipynb: expected nbformat 4/);
    await Deno.writeTextFile(path, `time,A`);
    await expect(runNotebook(path)).rejects.toThrow(/is not JSON/);
  });
});

test("progress is told cell by cell", async () => {
  const path = await written(["# Words", "1", "2"]);
  const told: unknown[] = [];
  await runNotebook(path, {
    progress: {
      cellStarted: (index, total, source) => told.push([index, total, source]),
      cellDone: (index, total) => told.push([index, total, "done"]),
      finished: () => told.push("finished"),
    },
  });
  expect(told).toEqual([
    ...[[0, 2, "1"], [0, 2, "done"]],
    ...[[1, 2, "2"], [1, 2, "done"]],
    "finished",
  ]);
  const wrong = { cellStarted: 1 } as never;
  await expect(runNotebook(path, { progress: wrong })).rejects.toThrow(
    /cellStarted of option "progress"/,
  );
});

test.skipIf(Deno.build.os !== "linux")(
  "no process and no file of the kernel is left, whether the notebook ends or is stopped",
  async () => {
    for (const last of ["1", "throw new RangeError('no')", "Deno.exit(1)", "while (true) {}"]) {
      const path = await written([
        `await Deno.writeTextFile("kernel.txt", Deno.pid + " " + Deno.readTextFileSync("/proc/self/cmdline"))`,
        last,
      ]);
      await runNotebook(path, { cellTimeout: 2 }).catch(() => {});
      const told = await Deno.readTextFile(path.replace("made.ipynb", "kernel.txt"));
      const pid = told.split(" ")[0];
      const connection = told.split("\0").find((word) => word.endsWith("connection.json"))!;
      const { NotFound } = Deno.errors;
      await expect(Deno.stat(`/proc/${pid}`)).rejects.toBeInstanceOf(NotFound);
      await expect(Deno.stat(connection.replace("/connection.json", ""))).rejects
        .toBeInstanceOf(NotFound);
      await dispose?.();
      dispose = undefined;
    }
  },
);

test.skipIf(Deno.build.os !== "linux")(
  "a kernel whose report is killed ends by itself and removes its file",
  async () => {
    const path = await written([
      `await Deno.writeTextFile("kernel.txt", Deno.pid + " " + Deno.readTextFileSync("/proc/self/cmdline"))`,
      `await new Promise((resolve) => setTimeout(resolve, 60_000))`,
    ]);
    const library = new URL("../../lib/report/run_notebook.ts", import.meta.url);
    const script = `import { runNotebook } from "${library}"; await runNotebook("${path}");`;
    const report = new Deno.Command(Deno.execPath(), {
      args: [
        "run",
        "-A",
        "--ext=ts",
        "--config",
        new URL("../../deno.json", import.meta.url).pathname,
        "-",
      ],
      stdin: "piped",
      stdout: "null",
      stderr: "null",
    }).spawn();
    const writer = report.stdin.getWriter();
    await writer.write(new TextEncoder().encode(script));
    await writer.close();
    const read = (file: string) => Deno.readTextFile(file).catch(() => "");
    const note = path.replace("made.ipynb", "kernel.txt");
    await until(async () => (await read(note)).includes("connection.json"));
    const told = await read(note);
    report.kill("SIGKILL");
    await report.status;
    const connection = told.split("\0").find((word) => word.endsWith("connection.json"))!;
    await until(async () => await read(connection) === "");
    // An ended process may stay listed, as a zombie, until someone asks how it ended.
    await until(async () => /^$|\) Z /.test(await read(`/proc/${told.split(" ")[0]}/stat`)));
  },
  30_000,
);

/** Waits until something holds; the test's own time limit ends the wait. */
async function until(holds: () => Promise<boolean>): Promise<void> {
  while (!await holds()) await new Promise((resolve) => setTimeout(resolve, 50));
}
