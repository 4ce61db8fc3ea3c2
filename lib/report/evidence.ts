import type { Caution } from "../quantity/caution.ts";
import { EVIDENCE_MEDIA_TYPE, type EvidenceBundle, type Source } from "../quantity/result.ts";
import type { Notebook } from "./notebook.ts";

/** What the results of a notebook tell about themselves, gathered for the front of a report. */
export interface Evidence {
  /** Cautions, each once, with the first cell that raised it. */
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

/** Gathers the evidence that results carry in a notebook's outputs.
 *
 * @param notebook an executed notebook */
export function collectEvidence(notebook: Notebook): Evidence {
  const found = notebook.cells.flatMap((cell, i) =>
    cell.cell_type !== "code" ? [] : cell.outputs.flatMap((output) => {
      if (output.output_type !== "display_data" && output.output_type !== "execute_result") {
        return [];
      }
      const bundle = output.data[EVIDENCE_MEDIA_TYPE] as EvidenceBundle | undefined;
      return bundle ? [{ cell: i + 1, bundle }] : [];
    })
  );
  const cautions = found.flatMap(({ cell, bundle }) =>
    (bundle.cautions ?? []).map((caution) => ({ ...caution, cell }))
  );
  return {
    cautions: firstOf(cautions, (c) => `${c.code} ${c.message}`)
      .toSorted((a, b) => ORDER[a.severity] - ORDER[b.severity]),
    sources: firstOf(found.flatMap(({ bundle }) => bundle.sources ?? []), (s) => s.name + s.sha256),
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
