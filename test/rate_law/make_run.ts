import { Run } from "../../lib/run/run.ts";

/** A run for a test: times in s (or the unit given), one signal in its unit. */
export function makeRun(options: {
  id?: string;
  times: readonly number[];
  timeUnit?: string;
  values: readonly number[];
  unit?: string;
  name?: string;
  temperature?: number;
  initial?: Record<string, number>;
}): Run {
  return new Run({
    id: options.id ?? "1",
    temperature: options.temperature,
    initialConcentrations: options.initial,
    times: { values: [...options.times], unit: options.timeUnit ?? "s" },
    signals: [{
      name: options.name ?? "A",
      unit: options.unit ?? "mol/L",
      values: [...options.values],
    }],
  });
}
