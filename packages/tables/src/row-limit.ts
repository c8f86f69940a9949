import { MAX_CELLS, MAX_ROWS } from "./limits";

/** Why a table of so many columns takes no further row; null: it does. */
export function rowRefusal(
  rows: number,
  columns: number,
): { found: string; allowed: string } | null {
  const most = Math.min(MAX_ROWS, Math.floor(MAX_CELLS / Math.max(columns, 1)));
  if (rows < most) return null;
  return { found: `more than ${most} rows`, allowed: "fewer in one file; part it into several" };
}
