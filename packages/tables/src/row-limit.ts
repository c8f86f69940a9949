import { MAX_CELLS, MAX_ROWS } from "./limits";
import type { RowProblem } from "./table";

/** Why a table of so many columns takes no further row; null: it does. */
export function rowRefusal(
  rows: number,
  columns: number,
): { found: string; allowed: string } | null {
  const most = Math.min(MAX_ROWS, Math.floor(MAX_CELLS / Math.max(columns, 1)));
  if (rows < most) return null;
  return { found: `more than ${most} rows`, allowed: "fewer in one file; part it into several" };
}

/** Of one row; a file of the wrong kind has one in every cell. */
const MAX_PROBLEMS = 10;

/** Adds a problem to a row's, and after ten of them only that there are more. */
export function addProblem(problems: RowProblem[], problem: RowProblem): void {
  if (problems.length < MAX_PROBLEMS) problems.push(problem);
  else if (problems.length === MAX_PROBLEMS) {
    problems.push({ column: null, found: "more cells that can't be read", allowed: "none" });
  }
}
