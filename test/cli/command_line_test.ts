import { describe, expect, test } from "vitest";

const ROOT = new URL("../../", import.meta.url).pathname;

/** Runs the command line as the task does. */
async function ratebook(
  args: readonly string[],
  cwd = ROOT,
): Promise<{ code: number; out: string; err: string }> {
  const { code, stdout, stderr } = await new Deno.Command(Deno.execPath(), {
    args: [
      ...["run", "--quiet", "--allow-read", "--allow-run", "--allow-env"],
      `${ROOT}lib/cli/main.ts`,
      ...args,
    ],
    cwd,
    env: { INIT_CWD: cwd, NO_COLOR: "1" },
  }).output();
  const text = (bytes: Uint8Array) => new TextDecoder().decode(bytes);
  return { code, out: text(stdout), err: text(stderr) };
}

describe("rate-law", () => {
  test("a table for people", async () => {
    const { code, out, err } = await ratebook([
      ...["rate-law", "data/e17_hydrolysis.csv", "--run", "60a", "--run", "60b"],
    ]);
    expect(err).toBe("");
    expect(code).toBe(0);
    expect(out).toMatch(/verdict\s+Order 1/);
    expect(out).toContain("SHA-256");
  });

  test("data for scripts", async () => {
    const { code, out } = await ratebook([
      ...["rate-law", "data/e17_absorbance.csv", "--order", "1", "--json"],
    ]);
    expect(code).toBe(0);
    const { rateLaws } = JSON.parse(out);
    expect(rateLaws[0].rateConstant.unit).toBe("s⁻¹");
    // The value behind these invented data is 2.1e-4 s⁻¹ (data/README.md).
    const [low, high] = rateLaws[0].rateConstant.interval95;
    expect(low).toBeLessThan(2.1e-4);
    expect(high).toBeGreaterThan(2.1e-4);
  });
});

test("raw signals: each run by itself, or with an initial concentration from the command line", async () => {
  const file = "data/e17_absorbance.csv";
  const together = await ratebook(["rate-law", file]);
  expect(together.code).toBe(2);
  expect(together.err).toContain("initial concentration");
  const each = await ratebook(["rate-law", file, "--each"]);
  expect(each.out.match(/verdict\s+Order 1/g)?.length).toBe(2);
  const known = await ratebook(["rate-law", file, "--initial", "E-17=5 mmol/L"]);
  expect(known.out).toMatch(/L mol⁻¹ s⁻¹/);
});

describe("arrhenius", () => {
  test("energy in another unit, prediction with its caution", async () => {
    const { code, out } = await ratebook([
      ...["arrhenius", "data/e17_hydrolysis.csv", "--at", "25 °C", "--energy", "kcal/mol"],
    ]);
    expect(code).toBe(0);
    expect(out).toMatch(/activation energy: 20\.\d+ ± 0\.0\d+ kcal\/mol/);
    expect(out).toContain("15.0 K below the tested range");
  });

  test("JSON keeps the cautions", async () => {
    const { out } = await ratebook([
      ...["arrhenius", "data/e17_hydrolysis.csv", "--at", "25 °C", "--json"],
    ]);
    const { arrhenius, predictions } = JSON.parse(out);
    expect(arrhenius.activationEnergy.unit).toBe("kJ/mol");
    expect(predictions[0].rateConstant.cautions[0].code).toBe("extrapolation");
  });
});

describe("bad input ends with code 2 and its reason on standard error", () => {
  test.each([
    ["no command", [], /^$/],
    [
      "an unknown command",
      ["fit"],
      /Cannot run "fit": there are rate-law, arrhenius, simulate, report/,
    ],
    ["an unknown option", ["rate-law", "x.csv", "--ordr", "1"], /--ordr/],
    ["a file that is not there", ["rate-law", "nowhere.csv"], /nowhere\.csv/],
    ["no file", ["arrhenius"], /name a file of runs/],
    [
      "an order that is no number",
      ["rate-law", "data/e17_absorbance.csv", "--order", "one"],
      /"one"/,
    ],
    [
      "a run that is not there",
      ["rate-law", "data/e17_hydrolysis.csv", "--run", "99"],
      /run "99": there are 40a/,
    ],
    ["a notebook that is none", ["report", "data/README.md"], /README\.md: it is not JSON/],
  ])("%s", async (_, args, reason) => {
    const { code, err } = await ratebook(args);
    expect(code).toBe(2);
    expect(err).toMatch(reason);
    expect(err).not.toContain("    at ");
  });
});

test("file names are meant from where the command was called", async () => {
  const { code, out } = await ratebook(
    ["rate-law", "e17_absorbance.csv", "--order", "1"],
    `${ROOT}data`,
  );
  expect(code).toBe(0);
  expect(out).toContain("e17_absorbance.csv");
});

test("help lists commands and options", async () => {
  const all = await ratebook(["--help"]);
  expect(all.code).toBe(0);
  expect(all.out).toContain("arrhenius FILE …");
  const one = await ratebook(["arrhenius", "--help"]);
  expect(one.out).toContain("--at TEMPERATURE");
});

describe("simulate", () => {
  test("a table, a figure, and CSV that is read back as a run", async () => {
    const folder = await Deno.makeTempDir();
    try {
      const { code, out, err } = await ratebook([
        ...["simulate", "data/consecutive.toml"],
        ...["--csv", `${folder}/out.csv`, "--svg", `${folder}/out.svg`],
      ]);
      expect(err).toBe("");
      expect(code).toBe(0);
      expect(out).toContain("every output time was reached");
      expect(await Deno.readTextFile(`${folder}/out.svg`)).toMatch(/^<svg/);
      const { readRuns } = await import("../../lib/run/read_runs.ts");
      const run = (await readRuns(`${folder}/out.csv`, { layout: "single" })).find("out");
      // A + B ⇌ C, C → D: [A] + [C] + [D] is conserved.
      const [a, c, d] = ["A", "C", "D"].map((name) => run.signal(name).values);
      a.forEach((value, i) => expect(value + c[i] + d[i]).toBeCloseTo(0.01, 12));
    } finally {
      await Deno.remove(folder, { recursive: true });
    }
  });

  test.each([
    [`mechanism = "A ->[k] B"\n[rate_constants]\nk = 1`, /"times" is missing/],
    [`mechanism = "A => B"`, /"rate_constants" is missing/],
    [`mechanism = `, /as TOML/],
    [
      `mechanism = "A ->[k] B"\n[rate_constants]\nk = 1\n[times]\nuntil = "3 m"`,
      /measures length, expected time/,
    ],
    [`mecanism = "A -> B"`, /did you mean "mechanism"/],
  ])("%j is bad input", async (text, reason) => {
    const file = await Deno.makeTempFile({ suffix: ".toml" });
    try {
      await Deno.writeTextFile(file, text);
      const { code, err } = await ratebook(["simulate", file]);
      expect(err).toMatch(reason);
      expect(code).toBe(2);
    } finally {
      await Deno.remove(file);
    }
  });
});

describe("report", () => {
  test("a cell that throws ends with code 1, the cell and the message, and writes nothing", async () => {
    const folder = await Deno.makeTempDir();
    try {
      const source = "throw new RangeError('the bath was cold');";
      const cell = { cell_type: "code", id: "a", metadata: {}, source };
      await Deno.writeTextFile(
        `${folder}/bad.ipynb`,
        JSON.stringify({
          nbformat: 4,
          nbformat_minor: 5,
          metadata: {},
          cells: [{ ...cell, execution_count: null, outputs: [] }],
        }),
      );
      const { code, err } = await ratebook(["report", "bad.ipynb", "--out", "written"], folder);
      expect(code).toBe(1);
      expect(err).toContain("Cell 1 stopped the notebook: RangeError: the bath was cold");
      expect([...Deno.readDirSync(folder)].map((f) => f.name)).toEqual(["bad.ipynb"]);
    } finally {
      await Deno.remove(folder, { recursive: true });
    }
  });
});

test("a command may not use the network or read files it was not given", async () => {
  const { arrhenius } = await import("../../lib/cli/arrhenius.ts");
  const { rateLaw } = await import("../../lib/cli/rate_law.ts");
  for (const command of [arrhenius, rateLaw]) {
    expect(command.permissions(["a.csv", "b,c.csv"], {})).toEqual(["--allow-read=a.csv,b,,c.csv"]);
  }
});
