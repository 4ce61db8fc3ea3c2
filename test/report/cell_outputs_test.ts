import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { CellOutputs } from "../../lib/report/cell_outputs.ts";
import type { JupyterMessage } from "../../lib/report/jupyter_message.ts";

function message(msg_type: string, content: unknown): JupyterMessage {
  const header = { msg_id: "m", msg_type, session: "s", username: "u", date: "", version: "5.3" };
  return { header, parent_header: {}, metadata: {}, content };
}

const print = (text: string, name = "stdout") => message("stream", { name, text });
const display = (text: string, display_id?: string) =>
  message("display_data", {
    data: { "text/plain": text },
    metadata: {},
    transient: { display_id },
  });

function gathered(...messages: JupyterMessage[]): unknown[] {
  const outputs = new CellOutputs(new Map());
  for (const one of messages) outputs.take(one);
  return outputs.outputs.map((o) =>
    o.output_type === "stream" ? o.text : o.output_type === "error" ? o.ename : o.data["text/plain"]
  );
}

describe("outputs", () => {
  test("that are printed lose nothing, whatever is in between", () => {
    const piece = fc.record({ name: fc.constantFrom("stdout", "stderr"), text: fc.string() });
    fc.assert(fc.property(fc.array(piece, { maxLength: 30 }), (pieces) => {
      const outputs = new CellOutputs(new Map());
      for (const { name, text } of pieces) outputs.take(print(text, name));
      for (const name of ["stdout", "stderr"]) {
        const kept = outputs.outputs.map((o) =>
          o.output_type === "stream" && o.name === name ? o.text : ""
        );
        expect(kept.join("")).toBe(pieces.map((p) => p.name === name ? p.text : "").join(""));
      }
      const names = outputs.outputs.map((o) => o.output_type === "stream" ? o.name : "");
      expect(names.some((name, i) => i > 0 && name === names[i - 1])).toBe(false);
    }));
  });

  test("are cleared at once, or when the next one comes", () => {
    const clear = (wait: boolean) => message("clear_output", { wait });
    expect(gathered(print("a"), clear(false))).toEqual([]);
    expect(gathered(print("a"), clear(true))).toEqual(["a"]);
    expect(gathered(print("a"), clear(true), print("b"))).toEqual(["b"]);
    expect(gathered(print("a"), clear(true), display("b"), print("c"))).toEqual(["b", "c"]);
  });

  test("with a display id are updated everywhere, in the cell they stand in", () => {
    const displays = new Map();
    const first = new CellOutputs(displays);
    first.take(display("old", "x"));
    first.take(display("old", "x"));
    first.take(display("other"));
    const second = new CellOutputs(displays);
    const data = { "text/plain": "new" };
    second.take(message("update_display_data", { data, transient: { display_id: "x" } }));
    second.take(message("update_display_data", { data, transient: { display_id: "unknown" } }));
    expect(first.outputs.map((o) => o.output_type === "display_data" && o.data["text/plain"]))
      .toEqual(["new", "new", "other"]);
    expect(second.outputs).toEqual([]);
  });

  test("are not made of messages that carry none", () => {
    const kinds = ["status", "execute_input", "comm_open", "comm_msg", "comm_close", "unknown"];
    expect(gathered(...kinds.map((kind) => message(kind, {})))).toEqual([]);
  });
});

test.each([
  ["stream", { name: "elsewhere", text: "a" }, /"elsewhere" as its name/],
  ["stream", { name: "stdout" }, /undefined as its text/],
  ["display_data", {}, /undefined as its data/],
  ["update_display_data", { data: 7 }, /7 as its data/],
  ["execute_result", { data: [] }, /\[\] as its data/],
  ["error", { ename: "E" }, /undefined as its evalue/],
])("a %s that the notebook format does not allow is refused: %o", (type, content, fault) => {
  expect(() => gathered(message(type, content))).toThrow(fault);
});
