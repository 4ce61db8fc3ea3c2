import { expect, test } from "vitest";
import { isDataFrame, toDataFrame } from "../../lib/run/data_frame.ts";
import { readRuns } from "../../lib/run/read_runs.ts";

const text = `run;temperature [°C];initial A [mmol/L];pH;time [min];A [mmol/L];u(A) [mmol/L]
1;25;10;7,4;0;10,05;0,05
1;25;10;7,4;5;7,8;0,04
1;25;10;7,4;10;;
2;35;5;8,1;0;5,1;0,05
2;35;5;8,1;5;<0,5;
`;

test("runs go into a data frame and come back unchanged", async () => {
  const runs = await readRuns({ name: "f.csv", text });
  const kept = runs.map((run) => run.id === "2" ? run.without([0], "late") : run);
  const frame = await toDataFrame(kept);
  expect(isDataFrame(frame)).toBe(true);
  expect(frame.shape).toEqual([5, 8]);
  expect(frame.columns).toContain("A [mmol/L]");
  const again = await readRuns(frame);
  for (const run of kept) {
    const back = again.find(run.id);
    expect(back.times).toEqual(run.times);
    expect(back.temperature).toBe(run.temperature);
    expect(back.initialConcentrations).toEqual(run.initialConcentrations);
    expect(back.properties).toEqual(run.properties);
    expect(back.exclusions).toEqual(run.exclusions);
    expect(back.signal("A").values).toEqual(run.signal("A").values);
    expect(back.signal("A").standardUncertainties).toEqual(run.signal("A").standardUncertainties);
    expect(back.signal("A").censored.map(({ limit }) => limit))
      .toEqual(run.signal("A").censored.map(({ limit }) => limit));
  }
});

test("a data frame made by the user is read by its headers, units and all", async () => {
  const frame = await toDataFrame((await readRuns({ name: "f.csv", text })).runs);
  const { DataFrame } = { DataFrame: frame.constructor } as unknown as {
    DataFrame: new (rows: unknown) => never;
  };
  const own = new DataFrame([{ "time [h]": 0, "A [mM]": 4 }, { "time [h]": 1, "A [mM]": null }, {
    "time [h]": null,
    "A [mM]": NaN,
  }]);
  const [run] = await readRuns(own);
  expect([...run.times]).toEqual([0, 3600]);
  expect([...run.signal("A").values]).toEqual([0.004, NaN]);
  await expect(readRuns(new DataFrame([{ "time": 0, "A [mM]": 4 }])))
    .rejects.toThrow(/data frame.*column 1.*"time \[min\]"/);
});
