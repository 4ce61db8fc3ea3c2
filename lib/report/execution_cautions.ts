import type { Caution } from "../quantity/caution.ts";
import { joinText, type Notebook } from "./notebook.ts";

/** What the state of a notebook says against its outputs: cells that failed, that were not executed, or that
 * were executed in another order than they stand in. A notebook from `runNotebook` has none of these.
 *
 * @param notebook an executed notebook */
export function executionCautions(notebook: Notebook): (Caution & { readonly cell: number })[] {
  const code = notebook.cells.flatMap((cell, i) =>
    cell.cell_type === "code" ? [{ cell, number: i + 1 }] : []
  );
  const failed = code.flatMap(({ cell, number }) =>
    cell.outputs.flatMap((output) => output.output_type === "error" ? [{ output, number }] : [])
  );
  const counted = code.filter(({ cell }) => cell.execution_count !== null);
  const skipped = code.find(({ cell }) =>
    cell.execution_count === null && joinText(cell.source).trim() !== ""
  );
  const disordered = counted.find(({ cell }, i) =>
    i > 0 && cell.execution_count! <= counted[i - 1].cell.execution_count!
  );
  return [
    ...failed.map(({ output, number }) => ({
      cell: number,
      code: "cell-failed",
      severity: "serious" as const,
      message:
        `Cell ${number} ended with ${output.ename}: ${output.evalue}. What depends on it is missing ` +
        `or from an earlier run.`,
    })),
    ...(!skipped ? [] : [{
      cell: skipped.number,
      code: "cell-not-executed",
      severity: "serious" as const,
      message: `Cell ${skipped.number} was not executed${
        counted.length === 0 ? ", nor was any other" : ""
      }: the report shows no result of it.`,
    }]),
    ...(!disordered ? [] : [{
      cell: disordered.number,
      code: "execution-order",
      severity: "serious" as const,
      message:
        `Cell ${disordered.number} was executed before the cell above it: a run from top to bottom may ` +
        `give other numbers.`,
    }]),
  ];
}
