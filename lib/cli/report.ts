import { basename } from "node:path";
import { progressBar } from "../report/progress_bar.ts";
import { writeReport, type WrittenReport } from "../report/write_report.ts";
import { type Command, textOf, UsageError } from "./command.ts";

/** `report NOTEBOOK`: runs a notebook and writes its report. */
export const report: Command = {
  name: "report",
  summary: "Run a notebook from top to bottom and write it, executed, with an HTML report",
  operands: "NOTEBOOK",
  options: {
    out: { type: "string", value: "FOLDER", help: "where to write; out if left out" },
    author: { type: "string", value: "NAME", help: "who answers for the report" },
    timeout: {
      type: "string",
      value: "SECONDS",
      help: "longest time for one cell; 600 if left out",
    },
  },
  // The kernel is a process of its own that may do what a notebook does: read files, use the network if
  // its author writes so. This process only starts it and talks to it on loopback.
  permissions: (_, values) => [
    "--allow-read",
    `--allow-write=${folderOf(values).replaceAll(",", ",,")},${temporaryFolder()}`,
    "--allow-net=127.0.0.1",
    "--allow-run=" + Deno.execPath(),
  ],
  run: async (operands, values) => {
    if (operands.length !== 1) {
      throw new UsageError(`Cannot report on ${operands.length} notebooks: name one`);
    }
    const timeout = textOf(values, "timeout");
    if (timeout !== undefined && !(Number(timeout) > 0)) {
      throw new UsageError(`Cannot use "${timeout}" as --timeout: write seconds, such as 600`);
    }
    const author = textOf(values, "author");
    const written = await writeReport(operands[0], {
      folder: folderOf(values),
      ...(author === undefined ? {} : { author }),
      ...(timeout === undefined ? {} : { cellTimeout: Number(timeout) }),
      progress: progressBar(),
    });
    return { text: summary(written), data: written };
  },
};

function folderOf(values: Parameters<typeof textOf>[0]): string {
  return textOf(values, "out") ?? "out";
}

function temporaryFolder(): string {
  return ["TMPDIR", "TEMP", "TMP"].map((name) => Deno.env.get(name)).find(Boolean) ?? "/tmp";
}

function summary({ html, notebook, evidence }: WrittenReport): string {
  const widest = Math.max(0, ...evidence.headlines.map((line) => line.label.length));
  const serious = evidence.cautions.filter((caution) => caution.severity === "serious").length;
  return [
    ...evidence.headlines.map((line) =>
      `${line.label.padEnd(widest)}   ${line.text}   (${line.title})`
    ),
    "",
    `cautions: ${evidence.cautions.length}, serious among them: ${serious}; all stand in the report`,
    `report:   ${html}`,
    `notebook: ${notebook}`,
    `open ${basename(html)} in a browser`,
  ].join("\n");
}
