import type { JupyterMessage } from "./jupyter_message.ts";
import type { Output } from "./notebook.ts";

/** Gathers the outputs of one cell from the messages that a kernel broadcasts. */
export class CellOutputs {
  #outputs: Output[] = [];
  #clearBeforeNext = false;
  readonly #displays: Map<string, Output[]>;

  /** Gathers the outputs of one cell.
   *
   * @param displays outputs of the whole notebook by display id, so that a later cell can update them */
  constructor(displays: Map<string, Output[]>) {
    this.#displays = displays;
  }

  /** The outputs so far. */
  get outputs(): readonly Output[] {
    return this.#outputs;
  }

  /** Takes a message; those that carry no output are passed over.
   *
   * @throws {TypeError} if it lacks what the notebook format asks for (a cell may broadcast what it likes) */
  take(message: JupyterMessage): void {
    const { content } = message;
    const type = message.header.msg_type;
    checkContent(type, content);
    switch (type) {
      case "stream":
        return this.#stream(content.name, content.text);
      case "display_data":
        return this.#display({
          output_type: "display_data",
          data: content.data,
          metadata: content.metadata ?? {},
        }, content.transient?.display_id);
      case "execute_result":
        return this.#display({
          output_type: "execute_result",
          execution_count: content.execution_count,
          data: content.data,
          metadata: content.metadata ?? {},
        }, content.transient?.display_id);
      case "update_display_data":
        return this.#update(content);
      case "error":
        return this.#add({
          output_type: "error",
          ename: content.ename,
          evalue: content.evalue,
          traceback: content.traceback ?? [],
        });
      case "clear_output":
        if (content.wait) this.#clearBeforeNext = true;
        else this.#outputs = [];
    }
  }

  #add(output: Output): void {
    if (this.#clearBeforeNext) this.#outputs = [];
    this.#clearBeforeNext = false;
    this.#outputs.push(output);
  }

  /** Neighbouring pieces of one stream are one output, as front ends do. */
  #stream(name: "stdout" | "stderr", text: string): void {
    const last = this.#outputs.at(-1);
    if (!this.#clearBeforeNext && last?.output_type === "stream" && last.name === name) {
      last.text = `${last.text}${text}`;
    } else {
      this.#add({ output_type: "stream", name, text });
    }
  }

  #display(output: Output, displayId: string | undefined): void {
    this.#add(output);
    if (displayId === undefined) return;
    this.#displays.set(displayId, [...(this.#displays.get(displayId) ?? []), output]);
  }

  // deno-lint-ignore no-explicit-any
  #update(content: any): void {
    for (const output of this.#displays.get(content.transient?.display_id) ?? []) {
      if (output.output_type === "display_data" || output.output_type === "execute_result") {
        output.data = content.data;
        output.metadata = content.metadata ?? {};
      }
    }
  }
}

/** Fields that the notebook format asks for in each kind of output. */
const NEEDED: Readonly<Record<string, Readonly<Record<string, (value: unknown) => boolean>>>> = {
  stream: {
    name: (value) => value === "stdout" || value === "stderr",
    text: (value) => typeof value === "string",
  },
  display_data: { data: isObject },
  update_display_data: { data: isObject },
  execute_result: { data: isObject },
  error: {
    ename: (value) => typeof value === "string",
    evalue: (value) => typeof value === "string",
  },
};

function checkContent(type: string, content: Readonly<Record<string, unknown>>): void {
  for (const [field, fits] of Object.entries(NEEDED[type] ?? {})) {
    if (fits(content[field])) continue;
    throw new TypeError(
      `Cannot keep an output: a message ${type} was broadcast with ` +
        `${JSON.stringify(content[field])} as its ${field}`,
    );
  }
}

function isObject(value: unknown): boolean {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}
