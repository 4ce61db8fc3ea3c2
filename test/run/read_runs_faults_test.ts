import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { readRuns, type ReadRunsOptions } from "../../lib/run/read_runs.ts";
import { RunFileError } from "../../lib/run/run_file_error.ts";

const lines = (...rows: string[]) => rows.join("\n") + "\n";
const fault = async (text: string, options?: ReadRunsOptions): Promise<RunFileError> => {
  const error = await readRuns({ name: "f.csv", text }, options).catch((error) => error);
  expect(error).toBeInstanceOf(RunFileError);
  return error;
};

describe("what is ambiguous or wrong is told with file, line, column, cell and a way out", () => {
  test.each<[string, string, Partial<RunFileError>, RegExp]>([
    [
      "a comma that may mark thousands",
      lines("time [min];A [mM]", "0;1,234", "5;1,100"),
      { line: 2, column: 2, header: "A [mM]", cell: "1,234" },
      /decimal or a thousands mark.*decimal: "," or "\."/,
    ],
    [
      "two decimal marks",
      lines("time [min];A [mM]", "0;10,5", "5;8.1"),
      { line: 2, column: 2, cell: "10,5" },
      /both 10,5 and 8\.1 \(line 3\)/,
    ],
    [
      "time that runs backwards",
      lines("time [min],A [mM]", "0,4", "", "10,3", "5,2"),
      { line: 5, column: 1, header: "time [min]", cell: "5" },
      /runs backwards, from 10 in line 4.*column "run"/,
    ],
    [
      "two units for one quantity",
      lines("time [min],A [mM],A [mol/L]", "0,4,5"),
      { line: 1, column: 3, cell: "A [mol/L]" },
      /twice, with different units.*"A \[mM\]"/,
    ],
    [
      "two units for an initial concentration",
      lines("time [min],A [mM],initial A [mM],initial A [mol/L]", "0,4,5,6"),
      { line: 1, column: 4 },
      /twice, with different units/,
    ],
    [
      "two times",
      lines("time [min],time [s],A [mM]", "0,0,4"),
      { line: 1, column: 2 },
      /2 columns of time/,
    ],
    [
      "an unknown unit",
      lines("time [min],A [mmol/Liter]", "0,4"),
      { line: 1, column: 2, cell: "A [mmol/Liter]" },
      /"Liter" is not known: write "liter"/,
    ],
    [
      "text in a number cell",
      lines("time [min],A [mM]", "0,4", "5,lost"),
      { line: 3, column: 2, cell: "lost" },
      /expected a number.*leave the cell empty/,
    ],
    [
      "a duplicate column",
      lines("time [min],A [mM],A [mM]", "0,4,5"),
      { line: 1, column: 3, cell: "A [mM]" },
      /stands there twice/,
    ],
    [
      "a column without name",
      lines("time [min],,A [mM]", "0,1,4"),
      { line: 1, column: 2 },
      /header is empty/,
    ],
    [
      "no time column",
      lines("minutes,A [mM]", "0,4"),
      { line: 1 },
      /no time column among "minutes", "A \[mM\]"; call it "time \[min\]"/,
    ],
    [
      "a time column of another name",
      lines("Zeit [min],A [mM]", "0,4"),
      { line: 1 },
      /call "Zeit \[min\]" "time \[min\]" if it is one/,
    ],
    [
      "time without unit",
      lines("time,A [mM]", "0,4"),
      { line: 1, column: 1, cell: "time" },
      /unit is missing.*"time \[min\]"/,
    ],
    [
      "a row that is too long",
      lines("time [min],A [mM]", "0,4,5", "5,3"),
      { line: 2, cell: "0,4,5" },
      /3 cells and the header 2.*separated by ";"/,
    ],
    [
      "a row that is too short",
      lines("run,time [min],A [mM]", "1,0,4", "5,3"),
      { line: 3, cell: "5,3" },
      /2 cells and the header 3/,
    ],
    [
      "clock times",
      lines("run,time [min],A [mM]", "1,23:50,4", "1,00:10,3"),
      { line: 2, column: 2, cell: "23:50" },
      /past midnight.*"time \[min\]"/,
    ],
    [
      "a fact that changes within a run",
      lines("run,time [min],A [mM],pH", "1,0,4,7.4", "1,5,3,7.1"),
      { line: 3, column: 4, cell: "7.1" },
      /was "7\.4" in line 2.*\[1\] for a pure number/,
    ],
    [
      "a temperature that changes within a run",
      lines("run,time [min],A [mM],T [°C]", "1,0,4,25", "1,5,3,30"),
      { line: 3, column: 4, cell: "30" },
      /was "25" in line 2 of the same run; a run has one/,
    ],
    [
      "an uncertainty of nothing",
      lines("time [min],A [mM],u(B) [mM]", "0,4,0.1"),
      { line: 1, column: 3 },
      /no signal "B".*write u\(A\)/,
    ],
    [
      "an uncertainty of another quantity",
      lines("time [min],A [mM],u(A) [AU]", "0,4,0.1"),
      { line: 1, column: 3 },
      /AU does not fit the unit of "A", mM/,
    ],
    [
      "a missing uncertainty",
      lines("time [min],A [mM],u(A) [mM]", "0,4,"),
      { line: 2, column: 3 },
      /number is missing/,
    ],
    [
      "an uncertainty of 0",
      lines("time [min],A [mM],u(A) [mM]", "0,4,0"),
      { line: 2, column: 3, cell: "0" },
      /must be more than 0/,
    ],
    [
      "a missing time",
      lines("time [min],A [mM]", "0,4", ",3"),
      { line: 3, column: 1, cell: "" },
      /number is missing here/,
    ],
    [
      "a missing run",
      lines("run,time [min],A [mM]", "1,0,4", ",5,3"),
      { line: 3, column: 1 },
      /run's name is missing/,
    ],
    ["an empty file", "\n\n", {}, /file is empty/],
    ["headers alone", "time [min],A [mM]\n", {}, /no readings under the header/],
    [
      "quotation marks that do not pair",
      lines("time [min],A [mM]", '0,"4', "5,3"),
      {},
      /quotation marks do not pair/,
    ],
  ])("%s", async (_, text, place, message) => {
    const error = await fault(text);
    expect(error.file).toBe("f.csv");
    for (const [key, value] of Object.entries(place)) {
      expect(error[key as keyof RunFileError], key).toBe(value);
    }
    expect(error.message).toMatch(message);
    expect(error.message).toMatch(/^Cannot read f\.csv/);
    expect(error.message).not.toMatch(/\.$/);
  });

  test("facts written differently but equal are no fault", async () => {
    const text = lines("run,time [min],A [mM],T [°C]", "1,0,4,25", "1,5,3,25.0");
    expect((await readRuns({ name: "f.csv", text })).find("1").temperature).toBe(298.15);
  });

  test("the comma of a number is known as decimal where the caller says so", async () => {
    const text = lines("time [min];A [mM]", "0;1,234", "5;1,100");
    const [run] = await readRuns({ name: "f.csv", text }, { decimal: "," });
    expect([...run.signal().values]).toEqual([0.001234, 0.0011]);
    await fault(text, { decimal: "." });
  });
});

test("all faults of a file are told together, the first ten in words", async () => {
  const rows = Array.from({ length: 14 }, (_, i) => `${i},bad${i}`);
  const error = await fault(lines("time [min],A [mM]", ...rows));
  expect(error.faults).toHaveLength(14);
  expect(error.faults.map((f) => f.line)).toEqual(rows.map((_, i) => i + 2));
  expect(error.message.split("\n")).toHaveLength(11);
  expect(error.message).toMatch(/… and 4 more$/);
  const headers = await fault(lines("time,A [xx],B [yy]", "0,1,2"));
  expect(headers.faults.map((f) => f.column)).toEqual([1, 2, 3]);
});

test("a fault of the syntax kind, so that a caller can tell it from a fault of the program", async () => {
  expect(await fault("time [min],A [mM]\n0,x\n")).toBeInstanceOf(SyntaxError);
});

describe("encodings", () => {
  const text = lines("time [min];A [mM];T [°C]", "0;4,5;25", "5;3,5;25");
  const utf16 = (littleEndian: boolean, mark: boolean) => {
    const view = new DataView(new ArrayBuffer(2 * text.length + 2));
    view.setUint16(0, 0xfeff, littleEndian);
    [...text].forEach((c, i) => view.setUint16(2 * i + 2, c.charCodeAt(0), littleEndian));
    return new Uint8Array(view.buffer, mark ? 0 : 2);
  };

  test.each([
    ["UTF-8", new TextEncoder().encode(text)],
    ["UTF-8 with its mark", new TextEncoder().encode("\ufeff" + text)],
    ["UTF-16 little-endian", utf16(true, true)],
    ["UTF-16 big-endian", utf16(false, true)],
  ])("%s is read", async (_, bytes) => {
    const [run] = await readRuns(new File([bytes], "f.csv"));
    expect([...run.signal().values]).toEqual([0.0045, 0.0035]);
    expect(run.temperature).toBe(298.15);
  });

  test.each([
    ["UTF-16 without its mark", utf16(true, false)],
    ["UTF-16 without its mark, ASCII alone", utf16(true, false).filter((byte) => byte < 0x80)],
    ["Windows-1252", Uint8Array.from(text, (c) => c.charCodeAt(0))],
  ])("%s is refused with what to do", async (_, bytes) => {
    await expect(readRuns(new File([bytes], "f.csv"))).rejects.toThrow(/save it as CSV UTF-8/);
  });
});

test("any text is either read or told as a fault of the file, never as one of the program", async () => {
  const cell = fc.constantFrom(
    "time [min]",
    "time",
    "run",
    "species",
    "A [mM]",
    "u(A) [mM]",
    "B [AU]",
    "pH",
    "T [°C]",
    "initial A [mM]",
    "left out",
    "0",
    "1",
    "1",
    "2,5",
    "1,234",
    "3.5",
    "-1",
    "",
    "",
    "n.d.",
    "<2",
    "x",
    '"',
    "1e400",
    "[]",
    "A []",
    "()",
    "/",
    "__proto__",
    "constructor [1]",
  );
  const file = fc.tuple(
    fc.array(fc.array(cell, { minLength: 1, maxLength: 5 }), { minLength: 1, maxLength: 6 }),
    fc.constantFrom(",", ";", "\t"),
  ).map(([rows, separator]) => rows.map((row) => row.join(separator)).join("\n"));
  const options = fc.record({
    layout: fc.constantFrom(undefined, "long", "wide", "single"),
    decimal: fc.constantFrom(undefined, ".", ","),
  });
  await fc.assert(
    fc.asyncProperty(fc.oneof(file, fc.string()), options, async (text, options) => {
      try {
        const runs = await readRuns({ name: "f.csv", text }, options as ReadRunsOptions);
        expect(runs.length).toBeGreaterThan(0);
        expect(String(runs)).toContain("f.csv");
      } catch (error) {
        if (!(error instanceof RunFileError)) throw error;
      }
    }),
    { numRuns: 3000 },
  );
});
