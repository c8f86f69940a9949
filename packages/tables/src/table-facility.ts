import { keyOf } from "./part-keys";
import type { RawTable } from "./raw-table";
import type { ColumnMatch, TableContext } from "./table-match";

/** The facility that all rows of a table are of, for what is remembered of its tables; null for several or none. */
export function facilityOfTable(
  table: Pick<RawTable, "rows">,
  matches: readonly ColumnMatch[],
  { document, defaults }: TableContext,
): string | null {
  const fallback = defaults?.facility ?? null;
  const index = matches.findIndex(({ field }) => field === "facility");
  if (index === -1) return fallback;
  const named = new Set<string | null>();
  for (const { cells } of table.rows) {
    const cell = cells[index] ?? null;
    named.add(cell === null || cell === "" ? fallback : String(cell));
    if (named.size > 1) return null;
  }
  const [only = null] = named;
  return only === null ? null : keyOf(document.facilities ?? [], only);
}
