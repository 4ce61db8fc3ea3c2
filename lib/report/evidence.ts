import type { Caution } from "../quantity/caution.ts";
import { EVIDENCE_MEDIA_TYPE, type Source } from "../quantity/result.ts";
import { executionCautions } from "./execution_cautions.ts";
import type { Notebook } from "./notebook.ts";
import { readEvidence } from "./read_evidence.ts";

/** What the results of a notebook tell about themselves, gathered for the front of a report. */
export interface Evidence {
  /** Cautions, each once, with the first cell that raised it; the serious ones first. */
  readonly cautions: readonly (Caution & { readonly cell: number })[];
  /** Files that were read, each once. */
  readonly sources: readonly Source[];
  /** Seeds of random work, each once. */
  readonly seeds: readonly number[];
  /** Numbers that answer the question, in reading order. */
  readonly headlines: readonly {
    readonly cell: number;
    readonly title: string;
    readonly label: string;
    readonly text: string;
  }[];
  /** Every result as data. */
  readonly results: readonly { readonly cell: number; readonly data: unknown }[];
}

const ORDER = { serious: 0, caution: 1, note: 2 } as const;

/** Gathers the evidence that results carry in a notebook's outputs, and what its execution says against them.
 *
 * @param notebook an executed notebook
 * @throws {TypeError} or {RangeError} if an output claims to be evidence and is not */
export function collectEvidence(notebook: Notebook): Evidence {
  const found = notebook.cells.flatMap((cell, i) =>
    cell.cell_type !== "code" ? [] : cell.outputs.flatMap((output) => {
      if (output.output_type !== "display_data" && output.output_type !== "execute_result") {
        return [];
      }
      const raw = output.data[EVIDENCE_MEDIA_TYPE];
      return raw === undefined ? [] : [{ cell: i + 1, bundle: readEvidence(raw, i + 1) }];
    })
  );
  const cautions = [
    ...executionCautions(notebook),
    ...found.flatMap(({ cell, bundle }) =>
      bundle.cautions.map((caution) => ({ ...caution, cell }))
    ),
  ];
  return {
    cautions: firstOf(cautions, (c) => JSON.stringify([c.code, c.severity, c.message, c.subject]))
      .toSorted((a, b) => ORDER[a.severity] - ORDER[b.severity]),
    sources: firstOf(
      found.flatMap(({ bundle }) => bundle.sources ?? []),
      (s) => `${s.name} ${s.sha256}`,
    ),
    seeds: firstOf(
      found.flatMap(({ bundle }) => bundle.seed === undefined ? [] : [bundle.seed]),
      String,
    ),
    headlines: firstOf(
      found.flatMap(({ cell, bundle }) =>
        (bundle.headlines ?? []).map((line) => ({ cell, title: bundle.title, ...line }))
      ),
      (line) => `${line.title} ${line.label} ${line.text}`,
    ),
    results: found.map(({ cell, bundle }) => ({ cell, data: bundle.data })),
  };
}

/** The first of all entries that have the same key. */
function firstOf<T>(entries: readonly T[], key: (entry: T) => string): T[] {
  return [...Map.groupBy(entries, key).values()].map(([first]) => first);
}
