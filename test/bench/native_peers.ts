import { deliveredError, type Problem } from "./problems.ts";

/** A run of a native peer. */
export interface NativeRun {
  readonly solver: string;
  readonly rtol: number;
  readonly ms: number;
  readonly error: number;
  readonly sensitivityError?: number;
}

/** Runs the native peers on one problem.
 *
 * @param folder where their run.sh is
 * @param scipyToo whether SciPy is left out
 * @returns their runs, Infinity as the error of one that failed */
export async function runPeers(
  folder: string,
  problem: Problem,
  rtols: readonly number[],
  withoutScipy: boolean,
): Promise<NativeRun[]> {
  const file = await Deno.makeTempFile({ suffix: ".json" });
  try {
    const { success, stderr } = await new Deno.Command(`${folder}/run.sh`, {
      args: [
        "--problems",
        problem.name,
        "--rtol",
        rtols.map((r) => r.toExponential(0)).join(","),
        ...(withoutScipy ? ["--no-scipy"] : []),
        file,
      ],
      stderr: "piped",
      stdout: "null",
    }).output();
    if (!success) {
      console.error(
        `The native peers could not be run: ${
          new TextDecoder().decode(stderr).trim().split("\n").at(-1)
        }`,
      );
      return [];
    }
    const { results } = JSON.parse(await Deno.readTextFile(file));
    // deno-lint-ignore no-explicit-any
    return results.map((row: any) => ({
      solver: row.solver,
      rtol: row.rtol,
      ms: row.ms,
      error: row.status === "ok" ? deliveredError(problem, row.errAt) : Infinity,
      sensitivityError: row.maxSensErr,
    }));
  } finally {
    await Deno.remove(file);
  }
}
