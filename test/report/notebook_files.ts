/** A notebook's file in a folder of its own inside this project, so that the import map is found; removed by
 * `dispose`. A cell that begins with `#` is Markdown. */
export async function notebookFile(
  cells: readonly string[],
): Promise<{ path: string; folder: string; dispose: () => Promise<void> }> {
  const here = new URL("./", import.meta.url).pathname;
  const folder = await Deno.makeTempDir({ dir: here, prefix: "tmp-notebook-" });
  const path = `${folder}/made.ipynb`;
  await Deno.writeTextFile(path, notebookText(cells));
  return { path, folder, dispose: () => Deno.remove(folder, { recursive: true }) };
}

/** A notebook as text. */
export function notebookText(cells: readonly string[]): string {
  return JSON.stringify({
    nbformat: 4,
    nbformat_minor: 5,
    metadata: {},
    cells: cells.map((source, i) => {
      const shared = { id: `c${i}`, metadata: {}, source };
      return source.startsWith("#")
        ? { cell_type: "markdown", ...shared }
        : { cell_type: "code", execution_count: null, outputs: [], ...shared };
    }),
  });
}
