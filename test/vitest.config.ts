// Tests are Vitest's, the library under test is loaded by Deno itself: its files are external to
// Vite, so the import map of deno.json holds for them as it does for a user.

interface DenoConfig {
  imports: Record<string, string>;
  scopes: Record<string, Record<string, string>>;
}

const config = JSON.parse(
  Deno.readTextFileSync(new URL("../deno.json", import.meta.url)),
) as DenoConfig;
const packages = { ...config.imports, ...config.scopes["./test/"] };

/** A package named in a test file becomes a data: module that Deno, not Vite, resolves. */
const denoPackages = {
  name: "deno-packages",
  enforce: "pre",
  resolveId(id: string): { id: string; external: true } | undefined {
    const target = packages[id];
    if (id === "vitest" || !target?.startsWith("npm:")) return undefined;
    const source = `import * as all from "${target}"; export * from "${target}";` +
      `export default all.default ?? all;`;
    return { id: `data:text/javascript,${encodeURIComponent(source)}`, external: true };
  },
};

export default {
  plugins: [denoPackages],
  test: {
    include: ["**/*_test.ts"],
    pool: "threads",
    setupFiles: ["./setup.ts"],
    testTimeout: 60_000,
    server: { deps: { external: [/\/lib\//, /\/mod\.ts$/] } },
  },
};
