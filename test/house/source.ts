/** Reading the library's own files, for the tests of its order. */

/** Folder of the project. */
export const ROOT = new URL("../../", import.meta.url);

/** A source file: path from the project's folder, its text, and the files and packages it imports. */
export interface SourceFile {
  readonly path: string;
  readonly text: string;
  readonly imports: readonly string[];
}

/** Every TypeScript file under lib/, in the order of their paths. */
export function libraryFiles(): SourceFile[] {
  return walk("lib/").sort().map((path) => {
    const text = Deno.readTextFileSync(new URL(path, ROOT));
    return { path, text, imports: importsOf(path, text) };
  });
}

/** What a file imports, types and dynamic imports as well: paths from the project's folder for
 * files, bare names for packages. */
export function importsOf(path: string, text: string): string[] {
  const code = withoutComments(text);
  const found = code.matchAll(
    /^\s*(?:import|export)\b[^;"']*?\bfrom\s*["']([^"']+)["']|^\s*import\s*["']([^"']+)["']|\bimport\s*\(\s*["']([^"']+)["']/gm,
  );
  return [...found].map((match) => match[1] ?? match[2] ?? match[3]).map((specifier) =>
    specifier.startsWith(".")
      ? new URL(specifier, new URL(path, ROOT)).href.slice(ROOT.href.length)
      : specifier
  );
}

/** A text with its comments blanked, line ends kept. */
export function withoutComments(text: string): string {
  return text.replaceAll(/\/\*[\s\S]*?\*\//g, (comment) => comment.replaceAll(/[^\n]/g, " "))
    .replaceAll(/^\s*\/\/.*$/gm, "");
}

/** The room of a file: `statistics` for `lib/statistics/x.ts`. */
export function roomOf(path: string): string {
  return path.split("/")[1];
}

function walk(folder: string): string[] {
  return [...Deno.readDirSync(new URL(folder, ROOT))].flatMap((entry) =>
    entry.isDirectory
      ? walk(`${folder}${entry.name}/`)
      : entry.name.endsWith(".ts")
      ? [folder + entry.name]
      : []
  );
}
