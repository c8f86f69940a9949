import type { RawColumn } from "./raw-table";

/**
 * A table's columns as a text that tells one layout from another, whatever their order: a unit that
 * changed is another. Its SHA-256 names what is remembered of such tables.
 */
export function layoutText(columns: readonly Pick<RawColumn, "name" | "unit">[]): string {
  return columns
    .map(({ name, unit }) => JSON.stringify([name, unit]))
    .toSorted()
    .join("\n");
}
