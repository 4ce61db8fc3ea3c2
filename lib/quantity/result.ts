import { type Caution, formatCaution } from "./caution.ts";
import { cellJson, cellText, type Section } from "./section.ts";
import { escapeHtml, sectionsHtml } from "./section_html.ts";
import { sectionsText } from "./section_text.ts";

/** A file that was read, so that a report can name it. */
export interface Source {
  /** File name, without folders. */
  readonly name: string;
  /** SHA-256 of its bytes, hexadecimal. */
  readonly sha256: string;
  /** Its length. */
  readonly bytes: number;
}

/** What a result tells a report beside its picture: media type `application/vnd.ratebook+json`. */
export interface EvidenceBundle {
  /** Kind of result. */
  readonly kind: string;
  /** Title as displayed. */
  readonly title: string;
  /** What its reader must know. */
  readonly cautions: readonly Caution[];
  /** The files behind it. */
  readonly sources?: readonly Source[];
  /** Seed of random work. */
  readonly seed?: number;
  /** The numbers that answer the question. */
  readonly headlines?: readonly { readonly label: string; readonly text: string }[];
  /** The result as data. */
  readonly data?: unknown;
}

/** Media type of {@link EvidenceBundle} in a notebook's outputs. */
export const EVIDENCE_MEDIA_TYPE = "application/vnd.ratebook+json";

/** What every result shares: one list of sections from which the terminal, the notebook, JSON and
 * the report are made, and cautions that cannot be lost on the way. */
export abstract class Result {
  /** Kind of result, stable, for scripts. */
  abstract readonly kind: string;

  /** First line of every view. */
  abstract get title(): string;

  /** The content, in reading order. */
  abstract sections(): readonly Section[];

  /** What the reader must know before using the numbers. */
  abstract readonly cautions: readonly Caution[];

  /** The files behind the result. */
  readonly sources: readonly Source[] = [];

  /** Seed of the random work behind the result, if there was any. */
  readonly seed?: number;

  /** Keys of the values that answer the question, for the top of a report. */
  protected headlineKeys(): readonly string[] {
    return [];
  }

  /** The headline values in words. */
  headlines(): { label: string; text: string }[] {
    const keys = this.headlineKeys();
    const rows = this.sections().flatMap((s) => s.kind === "values" ? s.rows : []);
    return keys.flatMap((key) => rows.filter((row) => row.key === key))
      .map((row) => ({ label: row.label, text: cellText(row.value, row.unit) }));
  }

  /** The result for a terminal. */
  toString(): string {
    return [this.title, ...sectionsText(this.sections()), ...this.cautions.map(formatCaution)]
      .join("\n");
  }

  /** The result as plain data with stable names. */
  toJSON(): Record<string, unknown> {
    const data: Record<string, unknown> = { kind: this.kind, title: this.title };
    for (const section of this.sections()) {
      if (section.kind === "values") {
        const values = section.rows.map((row) => [
          row.key,
          row.unit === undefined
            ? cellJson(row.value)
            : { value: cellJson(row.value), unit: row.unit },
        ]);
        if (section.key) data[section.key] = Object.fromEntries(values);
        else Object.assign(data, Object.fromEntries(values));
      } else if (section.kind === "table") {
        data[section.key] = section.rows.map((row) =>
          Object.fromEntries(section.columns.map((column, i) => [column.key, cellJson(row[i])]))
        );
      } else {
        data[section.key] = section.text;
      }
    }
    data.cautions = this.cautions;
    if (this.sources.length > 0) data.sources = this.sources;
    if (this.seed !== undefined) data.seed = this.seed;
    return data;
  }

  /** The result for a notebook: text, HTML, and the data that a report gathers. */
  [Symbol.for("Jupyter.display")](): Record<string, unknown> {
    const cautions = this.cautions.map((caution) =>
      `<p class="caution ${caution.severity}"><strong>${
        escapeHtml(formatCaution(caution))
      }</strong></p>`
    ).join("");
    return {
      "text/plain": this.toString(),
      "text/html": `<div class="ratebook ${this.kind}"><p class="result-title"><strong>${
        escapeHtml(this.title)
      }</strong></p>${sectionsHtml(this.sections())}${cautions}</div>`,
      [EVIDENCE_MEDIA_TYPE]: this.evidence(),
    };
  }

  /** What the result tells a report. */
  evidence(): EvidenceBundle {
    return {
      kind: this.kind,
      title: this.title,
      cautions: this.cautions,
      sources: this.sources,
      seed: this.seed,
      headlines: this.headlines(),
      data: this.toJSON(),
    };
  }

  /** What `console.log` prints. */
  [Symbol.for("Deno.customInspect")](): string {
    return this.toString();
  }
}
