import { describe, expect, test } from "vitest";
import { readRuns, type ReadRunsOptions } from "../../lib/run/read_runs.ts";

const read = (text: string, options?: ReadRunsOptions) =>
  readRuns({ name: "f.csv", text }, options);
const lines = (...rows: string[]) => rows.join("\n") + "\n";

const LONG = lines(
  "run,temperature [°C],initial ester [mmol/L],pH,operator,time [min],ester [mmol/L],u(ester) [µmol/L]",
  "a,25,10,7.4,Ines,0,10,50",
  "a,25,10,7.4,Ines,5,7.8,40",
  "b,35,5,8,Ines,0,5,50",
  "b,35,5,8,Ines,5,,",
  "b,35,5,8,Ines,10,<0.5,",
);

describe("a long table", () => {
  test("has a row a reading", async () => {
    const runs = await read(LONG);
    expect(runs.runs.map((run) => run.id)).toEqual(["a", "b"]);
    const [a, b] = runs;
    expect(a.temperature).toBe(298.15);
    expect(a.initialConcentrations).toEqual({ ester: 0.01 });
    expect(a.properties).toEqual({ pH: 7.4, operator: "Ines" });
    expect([...a.times]).toEqual([0, 300]);
    expect([...a.signal("ester").values]).toEqual([0.01, 0.0078]);
    expect(b.properties.pH).toBe(8);
    expect([...b.signal().values]).toEqual([0.005, NaN, NaN]);
    expect(b.signal().censored).toEqual([{ index: 2, text: "<0.5", limit: 0.0005 }]);
  });

  test("has uncertainties in a unit of their own", async () => {
    const signal = (await read(LONG)).find("a").signal();
    expect(signal.standardUncertainties![0]).toBeCloseTo(5e-5, 18);
    expect(signal.standardUncertainties![1]).toBeCloseTo(4e-5, 18);
  });

  test("may have its runs interleaved", async () => {
    const runs = await read(lines("run,time [s],A [mM]", "1,0,4", "2,0,8", "1,1,2", "2,1,4"));
    expect([...runs.find("2").signal().values]).toEqual([0.008, 0.004]);
  });

  test("may have several signals, of which a run lacks one", async () => {
    const runs = await read(lines("run,time [s],A [mM],p [kPa]", "1,0,4,", "2,0,8,90"));
    expect(runs.find("1").signals.map((signal) => signal.name)).toEqual(["A"]);
    expect(runs.find("2").signal("p").values[0]).toBe(90_000);
  });

  test("without a column run is one run, called after its file", async () => {
    const runs = await readRuns({
      name: "cell 4.csv",
      text: lines("time [s],A [mM]", "0,4", "1,2"),
    });
    expect(runs.runs.map((run) => run.id)).toEqual(["cell 4"]);
    expect(runs.cautions).toEqual([]);
  });

  test("is separated by what stands outside the brackets and quotes of its headers", async () => {
    for (const header of ["area (mean; n = 3) [mM]", '"area; mean\t[mM]"']) {
      const [run] = await read(lines(`time [s],${header}`, "0,4", "1,2"));
      expect([...run.signal().values]).toEqual([0.004, 0.002]);
    }
    const [run] = await read(lines("time [s];A, mean [mM]", "0;4"));
    expect(run.signal().name).toBe("A, mean");
    await expect(read(lines("time [s],A [mM]", "0,4"), { separator: ";" })).rejects.toThrow(
      /no time/,
    );
  });

  test("keeps equal times as replicates", async () => {
    const [run] = await read(lines("time [s],A [mM]", "0,4", "1,2", "1,2.1"));
    expect([...run.times]).toEqual([0, 1, 1]);
  });

  test("keeps what was left out, with the reason", async () => {
    const [run] = await read(lines("time [s],A [mM],left out", "0,4,", "1,9,air bubble", "2,1,"));
    expect(run.exclusions).toEqual([{ index: 1, reason: "air bubble" }]);
    expect(run.signal().values[1]).toBe(0.009);
  });
});

describe("species under one another", () => {
  const text = lines(
    "run,time [s],species,value [mmol/L],u(value) [mmol/L]",
    "1,0,A,4,0.1",
    "1,0,B,0,0.1",
    "1,1,A,3,0.1",
    "1,1,A,3.2,0.1",
    "1,2,B,<0.5,",
  );

  test("become signals on all times; a repeated time stays", async () => {
    const run = (await read(text)).find("1");
    expect([...run.times]).toEqual([0, 1, 1, 2]);
    expect([...run.signal("A").values]).toEqual([0.004, 0.003, 0.0032, NaN]);
    expect([...run.signal("B").values]).toEqual([0, NaN, NaN, NaN]);
    expect(run.signal("B").censored).toEqual([{ index: 3, text: "<0.5", limit: 0.0005 }]);
    expect(run.signal("A").standardUncertainties![2]).toBeCloseTo(1e-4, 18);
  });

  test("need a name and one column of values", async () => {
    await expect(read(lines("time [s],species,value [mM]", "0,A,4", "1,,3")))
      .rejects.toThrow(/line 3, column 2 \(species\).*name of the species is missing/);
    await expect(read(lines("time [s],species,a [mM],b [mM]", "0,A,4,5")))
      .rejects.toThrow(/exactly one column of values/);
  });
});

describe("a wide table", () => {
  const WIDE = lines(
    "time [min],run 1 [mmol/L],run 2 [mmol/L],u(run 2) [mmol/L]",
    "temperature [°C],25,35,",
    "initial ester [mmol/L],10,5,",
    "pH,7.4,8,",
    "0,10,5,0.1",
    "5,7.8,n.d.,",
  );

  test("has a column a run and facts in rows under the headers", async () => {
    const runs = await read(WIDE);
    const [one, two] = runs;
    expect(runs.length).toBe(2);
    expect(one).toMatchObject({ id: "run 1", temperature: 298.15, properties: { pH: 7.4 } });
    expect(two.initialConcentrations).toEqual({ ester: 0.005 });
    expect([...one.signal("ester").values]).toEqual([0.01, 0.0078]);
    expect(two.signal().censored).toEqual([{ index: 1, text: "n.d." }]);
    expect(two.signal().standardUncertainties![0]).toBeCloseTo(1e-4, 18);
  });

  test("says that it was read so, and what to do if that is wrong", async () => {
    const [note] = (await read(WIDE)).cautions;
    expect(note).toMatchObject({ code: "read-as-wide", severity: "note" });
    expect(note.message).toMatch(/layout: "single"/);
    expect((await read(WIDE, { layout: "wide" })).cautions).toEqual([]);
  });

  test("takes the signal's name from an option, else from the facts or the unit", async () => {
    const text = (unit: string) => lines(`time [s],a [${unit}],b [${unit}]`, "0,1,2");
    expect((await read(text("mM"), { species: "ester" })).find("a").signal().name).toBe("ester");
    expect((await read(text("AU"))).find("a").signal().name).toBe("absorbance");
    expect((await read(text("torr"))).find("a").signal().name).toBe("pressure");
    expect((await read(text("mM"), { initial: { acid: 1 } })).find("a").signal().name).toBe("acid");
  });

  test("is one run with several signals where that is said", async () => {
    const [run] = await read(lines("time [s],A [mM],B [mM]", "0,4,0", "1,3,1"), {
      layout: "single",
    });
    expect(run.signals.map((signal) => signal.name)).toEqual(["A", "B"]);
  });

  test("of columns with different units says both ways out", async () => {
    const text = lines("time [s],A [mM],p [kPa]", "0,4,90");
    await expect(read(text)).rejects.toThrow(
      /\(mM, kPa\).*layout: "single".*one unit if each is a run/,
    );
    expect((await read(text, { layout: "single" })).find("f").signals).toHaveLength(2);
    await expect(read(text, { layout: "wide" })).rejects.toThrow(/kPa does not fit/);
  });

  test("takes words among its times for a fault, not for a fact", async () => {
    await expect(read(lines("time [s],a [mM],b [mM]", "0,1,2", "ten,3,4")))
      .rejects.toThrow(/line 3, column 1 \(time \[s\]\): "ten": expected a number/);
    await expect(read(lines("time [s],a [mM],b [mM]", "flow [mM],3,4", "0,1,2")))
      .rejects.toThrow(/expected a time, or a fact of the runs/);
  });
});

describe("facts that a file lacks come from options", () => {
  const text = lines("run,time [s],A [mM]", "1,0,4", "2,0,8");

  test("for all runs and for single ones, which win", async () => {
    const runs = await read(text, {
      temperature: "25 °C",
      initial: { A: "4 mmol/L" },
      runs: { 2: { temperature: 308.15, initial: { A: 0.008, base: 0.1 } } },
    });
    expect(runs.find("1")).toMatchObject({
      temperature: 298.15,
      initialConcentrations: { A: 0.004 },
    });
    expect(runs.find("2")).toMatchObject({
      temperature: 308.15,
      initialConcentrations: { A: 0.008, base: 0.1 },
    });
    expect(runs.cautions).toEqual([]);
  });

  test("and do not overrule the file in silence", async () => {
    const runs = await read(LONG, { temperature: "35 °C" });
    expect(runs.cautions.map((caution) => [caution.code, caution.subject]))
      .toEqual([["file-overruled", "a"]]);
    expect(runs.cautions[0].message).toMatch(/308\.150 K by an option; its file says 298\.150 K/);
  });

  test.each([
    [{ runs: { 3: { temperature: 300 } } }, /facts of run "3": the file has 1, 2/],
    [{ temperature: "25 C" }, /option "temperature" of readRuns.*write "°C"/],
    [{ initial: { A: "4 min" } }, /measures time/],
    [{ temprature: 300 }, /"temprature".*did you mean "temperature"/],
    [{ runs: { 1: { initials: {} } } }, /"initials".*did you mean "initial"/],
    [{ decimal: ";" }, /one of "\.", ","/],
    [{ layout: "tall" }, /one of "long", "wide", "single"/],
  ])("%j is refused", async (options, message) => {
    await expect(read(text, options as ReadRunsOptions)).rejects.toThrow(message);
  });
});

describe("sources", () => {
  // SHA-256 of "abc": FIPS 180-2, appendix B.1.
  test("the hash is that of the bytes", async () => {
    const error = await readRuns({ name: "abc.csv", text: "abc" }).catch((error) => error);
    expect(error.file).toBe("abc.csv");
    const bytes = new TextEncoder().encode(LONG);
    const digest = new Uint8Array(await crypto.subtle.digest("SHA-256", bytes)).toHex();
    expect((await read(LONG)).sources).toEqual([{
      name: "f.csv",
      sha256: digest,
      bytes: bytes.length,
    }]);
    const { readSource } = await import("../../lib/run/source_text.ts");
    expect((await readSource({ name: "abc", text: "abc" })).source.sha256)
      .toBe("ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
  });

  test("a path, a file URL, a File and a text give the same", async () => {
    const folder = await Deno.makeTempDir();
    try {
      const path = `${folder}/100% run.csv`;
      await Deno.writeTextFile(path, LONG);
      const url = new URL(`file://${folder}/100%25%20run.csv`);
      const file = new File([LONG], "100% run.csv");
      const all = await Promise.all(
        [path, url, file, { name: "100% run.csv", text: LONG }].map((source) => readRuns(source)),
      );
      for (const runs of all) {
        expect(runs.sources).toEqual(all[0].sources);
        expect(runs.readings()).toEqual(all[0].readings());
      }
      await expect(readRuns(`${folder}/none.csv`)).rejects.toThrow(Deno.errors.NotFound);
    } finally {
      await Deno.remove(folder, { recursive: true });
    }
  });

  test("several files make one set; a run's name may be there once", async () => {
    const text = lines("time [s],A [mM]", "0,4", "1,2");
    const both = await readRuns([{ name: "a.csv", text }, { name: "b.csv", text }]);
    expect(both.runs.map((run) => run.id)).toEqual(["a", "b"]);
    expect(both.sources.map((source) => source.name)).toEqual(["a.csv", "b.csv"]);
    await expect(readRuns([{ name: "a.csv", text }, { name: "a.csv", text }]))
      .rejects.toThrow(/a run "a" is there already/);
  });

  test("rows of objects are read, with null and NaN as no reading", async () => {
    const runs = await readRuns([
      { run: "1", "time [s]": 0, "A [mM]": 4.5 },
      { run: "1", "time [s]": 1, "A [mM]": null },
      { run: "1", "time [s]": 2, "A [mM]": NaN },
      { run: "1", "time [s]": 3, "A [mM]": "<LOQ" },
    ]);
    expect([...runs.find("1").signal().values]).toEqual([0.0045, NaN, NaN, NaN]);
    expect(runs.find("1").signal().censored).toEqual([{ index: 3, text: "<LOQ" }]);
    const comma = await readRuns([{ "time [s]": 0.5, "A [mM]": "4,5" }], { decimal: "," });
    expect([...comma.runs[0].times]).toEqual([0.5]);
  });

  test.each([
    [[], /from no file/],
    [42, /from 42: expected a path/],
    ["time [s],A [mM]\n0,1", /path of several lines.*\{ name: "runs\.csv", text \}/],
    [new URL("http://localhost/x.csv"), /only files are read/],
  ])("%s is refused", async (source, message) => {
    await expect(readRuns(source as string)).rejects.toThrow(message);
  });
});
