import * as option from "../quantity/options.ts";
import type { Caution } from "../quantity/caution.ts";
import type { EvidenceBundle, Source } from "../quantity/result.ts";

/** Reads the evidence that an output carries; any cell can display such data, so they are checked.
 *
 * @param raw what was displayed @param cell the cell, from 1
 * @throws {TypeError} if it is not evidence @throws {RangeError} on a severity that does not exist */
export function readEvidence(raw: unknown, cell: number): EvidenceBundle {
  const owner = `the evidence that cell ${cell} displays`;
  const given = option.record((value: unknown) => value)(raw, owner);
  const known = Object.entries(given).filter(([name]) => Object.hasOwn(SHAPE, name));
  const read = option.readOptions(owner, Object.fromEntries(known), SHAPE);
  const kind = read.kind ?? "result";
  return { ...read, kind, title: read.title ?? kind, cautions: read.cautions ?? [] };
}

const SHAPE = {
  kind: option.text,
  title: option.text,
  cautions: option.list((value, name): Caution => {
    const { subject, ...caution } = option.readOptions(name, value, {
      code: option.text,
      severity: option.oneOf("note", "caution", "serious"),
      message: option.text,
      subject: option.text,
    });
    const complete = whole(name, caution, ["code", "severity", "message"]);
    return subject === undefined ? complete : { ...complete, subject };
  }),
  sources: option.list((value, name): Source =>
    whole(
      name,
      option.readOptions(name, value, {
        name: option.text,
        sha256: option.text,
        bytes: option.integer(),
      }),
      ["name", "sha256", "bytes"],
    )
  ),
  seed: option.number(),
  headlines: option.list((value, name) =>
    whole(name, option.readOptions(name, value, { label: option.text, text: option.text }), [
      "label",
      "text",
    ])
  ),
  data: (value: unknown): unknown => value,
};

function whole<T extends object>(name: string, value: T, needed: (keyof T)[]): Required<T> {
  for (const key of needed) {
    if (value[key] === undefined) {
      throw new TypeError(`Cannot use ${name}: its ${String(key)} is missing`);
    }
  }
  return value as Required<T>;
}
