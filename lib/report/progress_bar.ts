import type { NotebookProgress } from "./run_notebook.ts";

/** Where a progress bar is written: standard error, or a stand-in for it. */
export interface ProgressStream {
  /** Whether it is a terminal on which a line can be written over. */
  isTerminal(): boolean;
  /** Writes bytes. */
  writeSync(bytes: Uint8Array): number;
}

const WIDTH = 24;

/** A progress bar by cell on a terminal; silent elsewhere.
 *
 * @param stream where to write; standard error if left out */
export function progressBar(stream: ProgressStream = Deno.stderr): NotebookProgress {
  const write = (text: string) => stream.writeSync(new TextEncoder().encode(text));
  const visible = stream.isTerminal();
  return {
    cellStarted(index, total, source) {
      if (!visible) return;
      const done = Math.round(WIDTH * index / total);
      const first = source.split("\n").find((line) => line.trim() !== "") ?? "";
      const label = first.length > 40 ? `${first.slice(0, 39)}…` : first;
      write(
        `\r\x1b[K[${"█".repeat(done)}${"░".repeat(WIDTH - done)}] cell ${
          index + 1
        } of ${total}  ${label}`,
      );
    },
    finished() {
      if (visible) write("\r\x1b[K");
    },
  };
}
