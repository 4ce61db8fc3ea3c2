import { beforeAll, describe, expect, test } from "vitest";
import { ROOT } from "./source.ts";

/** What `deno info --json` says, as far as it is read here. */
interface Graph {
  readonly roots: readonly string[];
  readonly redirects?: Readonly<Record<string, string>>;
  readonly modules: readonly {
    readonly specifier: string;
    readonly error?: string;
    readonly npmPackage?: string;
    readonly dependencies?: readonly {
      readonly specifier: string;
      readonly isDynamic?: boolean;
      readonly code?: { readonly specifier?: string; readonly error?: string };
    }[];
  }[];
  readonly npmPackages?: Readonly<
    Record<string, { readonly name: string; readonly dependencies: readonly string[] }>
  >;
}

/** Packages that are large, or of no use to somebody who imports the library: loaded where they
 * are needed, or never. */
const KEPT_AWAY = ["danfojs", "csv-parse", "vitest", "temml", "playwright-core", "fast-check"];

async function moduleGraph(entry: string): Promise<Graph> {
  const { stdout, stderr, success } = await new Deno.Command(Deno.execPath(), {
    args: ["info", "--json", entry],
    cwd: ROOT,
  }).output();
  expect(success, new TextDecoder().decode(stderr)).toBe(true);
  return JSON.parse(new TextDecoder().decode(stdout)) as Graph;
}

/** Modules and packages loaded with the entry, by name: dynamic imports are not followed, nor are
 * imports of types. */
function loaded(graph: Graph): Set<string> {
  const modules = new Map(graph.modules.map((module) => [module.specifier, module]));
  const resolve = (specifier: string) => graph.redirects?.[specifier] ?? specifier;
  const names = new Set<string>();
  const addPackage = (id: string): void => {
    const found = graph.npmPackages?.[id];
    if (!found || names.has(`npm ${id}`)) return;
    names.add(`npm ${id}`).add(found.name);
    found.dependencies.forEach(addPackage);
  };
  const visit = (specifier: string): void => {
    if (names.has(specifier)) return;
    names.add(specifier);
    const module = modules.get(specifier);
    if (module?.npmPackage) addPackage(module.npmPackage);
    for (const dependency of module?.dependencies ?? []) {
      const target = dependency.code?.specifier;
      if (target && !dependency.isDynamic) visit(resolve(target));
    }
  };
  graph.roots.forEach((root) => visit(resolve(root)));
  return names;
}

describe("importing mod.ts", () => {
  let graph: Graph;
  let names: Set<string>;

  beforeAll(async () => {
    const exists = await Deno.stat(new URL("mod.ts", ROOT)).then(() => true, () => false);
    expect(exists, "mod.ts is missing from the project's folder").toBe(true);
    graph = await moduleGraph("mod.ts");
    names = loaded(graph);
  });

  test("finds every module", () => {
    const broken = graph.modules.flatMap((module) => [
      ...(module.error ? [`${module.specifier}: ${module.error}`] : []),
      ...(module.dependencies ?? []).flatMap((dependency) =>
        dependency.code?.error ? [`${dependency.specifier}: ${dependency.code.error}`] : []
      ),
    ]);
    expect(broken).toEqual([]);
  });

  test("loads the rooms and the unit library, so the graph is read aright", () => {
    expect([...names].some((name) => name.endsWith("/lib/quantity/unit.ts"))).toBe(true);
    expect(names).toContain("js-quantities");
  });

  test.each(KEPT_AWAY)("does not load %s", (name) => {
    expect(names).not.toContain(name);
  });

  test("gives a public surface that can be taken in: 25 to 45 functions and classes, never above 60", async () => {
    const all = await import("../../mod.ts") as Record<string, unknown>;
    const count = Object.values(all).filter((value) => typeof value === "function").length;
    if (count < 25 || count > 45) console.info(`mod.ts exports ${count} functions and classes`);
    expect(count).toBeGreaterThan(0);
    expect(count).toBeLessThanOrEqual(60);
  });
});
