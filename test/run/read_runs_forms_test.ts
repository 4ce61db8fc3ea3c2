import fc from "fast-check";
import { expect, test } from "vitest";
import { readRuns, type ReadRunsOptions } from "../../lib/run/read_runs.ts";
import type { Run } from "../../lib/run/run.ts";
import { RunSet } from "../../lib/run/run_set.ts";

/** Runs as a laboratory would have them, all followed at the same times; `null` is no reading, a text a
 * reading below a limit. */
interface Laboratory {
  readonly times: readonly number[];
  readonly runs: readonly {
    readonly id: string;
    readonly temperature: number;
    readonly initial: number;
    readonly readings: readonly (number | string | null)[];
  }[];
}

/** Decimal numbers as instruments print them. */
const decimal = (digits: number) =>
  fc.tuple(fc.integer({ min: 0, max: 10 ** (digits + 2) }), fc.integer({ min: 1, max: digits }))
    .map(([figures, places]) => Number((figures / 10 ** places).toFixed(places)));
const reading = fc.oneof(
  { weight: 8, arbitrary: decimal(5) },
  { weight: 1, arbitrary: fc.constant(null) },
  { weight: 1, arbitrary: fc.constantFrom("n.d.", "<LOQ", "BDL") },
);

const laboratory: fc.Arbitrary<Laboratory> = fc.record({
  times: fc.array(decimal(3), { minLength: 1, maxLength: 8 })
    .map((times) => times.toSorted((a, b) => a - b)),
  count: fc.integer({ min: 2, max: 4 }),
}).chain(({ times, count }) =>
  fc.record({
    times: fc.constant(times),
    runs: fc.tuple(...Array.from({ length: count }, (_, i) =>
      fc.record({
        id: fc.constant(`run ${i + 1}`),
        temperature: decimal(2),
        initial: decimal(3),
        // A column without any reading has no unit's worth of meaning in a long table.
        readings: fc.array(reading, { minLength: times.length, maxLength: times.length })
          .filter((readings) => readings.some((r) => r !== null)),
      }))),
  })
);

type Cells = (string | number | null)[][];

const long = ({ times, runs }: Laboratory): Cells => [
  ["run", "temperature [°C]", "initial ester [mmol/L]", "time [min]", "ester [mmol/L]"],
  ...runs.flatMap((run) =>
    times.map((time, i) => [run.id, run.temperature, run.initial, time, run.readings[i]])
  ),
];

const wide = ({ times, runs }: Laboratory): Cells => [
  ["time [min]", ...runs.map((run) => `${run.id} [mmol/L]`)],
  ["temperature [°C]", ...runs.map((run) => run.temperature)],
  ["initial ester [mmol/L]", ...runs.map((run) => run.initial)],
  ...times.map((time, i) => [time, ...runs.map((run) => run.readings[i])]),
];

const bySpecies = (given: Laboratory): Cells => [
  ["run", "temperature [°C]", "initial ester [mmol/L]", "time [min]", "species", "value [mmol/L]"],
  ...long(given).slice(1).map(([run, T, initial, time, value]) => [
    run,
    T,
    initial,
    time,
    "ester",
    value,
  ]),
];

interface Writing {
  readonly separator: "," | ";" | "\t";
  readonly decimal: "." | ",";
  readonly lineEnd?: string;
  readonly mark?: string;
  readonly quoted?: boolean;
  readonly blankRows?: boolean;
}

function write(cells: Cells, writing: Writing): string {
  const { separator, decimal, lineEnd = "\n", mark = "", quoted = false, blankRows = false } =
    writing;
  const rows = cells.map((row) =>
    row.map((cell) => {
      const text = typeof cell === "number" ? String(cell).replace(".", decimal) : cell ?? "";
      return quoted ? `"${text.replaceAll('"', '""')}"` : text;
    }).join(separator)
  );
  const blank = blankRows ? lineEnd + separator.repeat(cells[0].length - 1) + lineEnd : "";
  return mark + rows.join(lineEnd + blank) + lineEnd;
}

const FORMS: Record<string, { cells: (given: Laboratory) => Cells; writing: Writing }> = {
  "long, comma": { cells: long, writing: { separator: ",", decimal: "." } },
  "wide, comma": { cells: wide, writing: { separator: ",", decimal: "." } },
  "long, semicolon and decimal comma": { cells: long, writing: { separator: ";", decimal: "," } },
  "wide, semicolon and decimal comma": { cells: wide, writing: { separator: ";", decimal: "," } },
  "long, tab": { cells: long, writing: { separator: "\t", decimal: "." } },
  "wide, tab and decimal comma": { cells: wide, writing: { separator: "\t", decimal: "," } },
  "long, with mark and CRLF": {
    cells: long,
    writing: { separator: ",", decimal: ".", mark: "\ufeff", lineEnd: "\r\n" },
  },
  "wide, quoted, with blank rows": {
    cells: wide,
    writing: { separator: ",", decimal: ",", quoted: true, blankRows: true, lineEnd: "\r\n" },
  },
  "a row a species": { cells: bySpecies, writing: { separator: ",", decimal: "." } },
};

function plain(run: Run) {
  const signal = run.signal("ester");
  return {
    id: run.id,
    temperature: run.temperature,
    initial: run.initialConcentrations,
    times: run.times,
    values: signal.values,
    censored: signal.censored,
  };
}

/** Reads in one form; the decimal mark is stated only if the numbers alone cannot tell it. */
async function readForm(given: Laboratory, { cells, writing }: typeof FORMS[string]) {
  const text = write(cells(given), writing);
  const read = (options: ReadRunsOptions) =>
    readRuns({ name: "f.csv", text }, { species: "ester", ...options });
  try {
    return (await read({})).runs.map(plain);
  } catch (error) {
    if (!/thousands mark, and nothing else/.test((error as Error).message)) throw error;
    return (await read({ decimal: writing.decimal })).runs.map(plain);
  }
}

test("the same data in every form give identical arrays", async () => {
  await fc.assert(
    fc.asyncProperty(laboratory, async (given) => {
      const expected = await readForm(given, FORMS["long, comma"]);
      expect(expected.map((run) => run.id)).toEqual(given.runs.map((run) => run.id));
      for (const [name, form] of Object.entries(FORMS)) {
        expect(await readForm(given, form), name).toEqual(expected);
      }
    }),
    { numRuns: 60 },
  );
});

test("what is read is what was written: no reading appears, vanishes or becomes 0", async () => {
  await fc.assert(
    fc.asyncProperty(laboratory, async (given) => {
      const runs = await readForm(given, FORMS["wide, comma"]);
      runs.forEach((run, j) => {
        const own = given.runs[j];
        own.readings.forEach((reading, i) => {
          if (typeof reading === "number") expect(run.values[i]).toBe(reading / 1000);
          else expect(run.values[i]).toBeNaN();
        });
        expect(run.censored).toEqual(
          own.readings.flatMap((text, index) => typeof text === "string" ? [{ index, text }] : []),
        );
        expect(run.times).toEqual(Float64Array.from(given.times, (t) => t * 60));
      });
    }),
    { numRuns: 60 },
  );
});

test("readings written and read again lose nothing", async () => {
  await fc.assert(
    fc.asyncProperty(laboratory, fc.constantFrom(",", ";", "\t"), async (given, separator) => {
      const text = write(long(given), { separator: ",", decimal: "." });
      const all = await readRuns({ name: "f.csv", text });
      const [first, ...rest] = all;
      const runs = new RunSet([first.without([0], 'stirrer "off"; see note'), ...rest]);
      const rows = runs.readings();
      const headers = Object.keys(rows[0]);
      const cells = [headers, ...rows.map((row) => headers.map((header) => row[header]))];
      const again = await readRuns({
        name: "again.csv",
        text: write(cells, { separator: separator as ",", decimal: ".", quoted: true }),
      });
      expect(again.runs.map(plain)).toEqual(runs.runs.map(plain));
      expect(again.runs.map((run) => run.exclusions)).toEqual(runs.runs.map((r) => r.exclusions));
    }),
    { numRuns: 60 },
  );
});
