/** Versions of the library, of what it runs on, and of the packages that numbers and pictures come from. */
export async function runtimeVersions(): Promise<Record<string, string>> {
  const file = new URL("../../deno.json", import.meta.url);
  const config = JSON.parse(await Deno.readTextFile(file)) as {
    version: string;
    imports: Record<string, string>;
  };
  const packages = Object.values(config.imports)
    .filter((target) => target.startsWith("npm:"))
    .map((target) => target.slice(4).replace(/^(@?[^@]+@[^/]+).*$/, "$1"));
  return {
    "Ratebook": config.version,
    "Deno": Deno.version.deno,
    "V8": Deno.version.v8,
    "TypeScript": Deno.version.typescript,
    "Packages": packages.join(", "),
  };
}
