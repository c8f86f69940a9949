import type { RawCell, RawTable } from "./raw-table";

/** How a cell says that nothing is there (common practice), in small letters. */
const IN_NUMBERS = new Set([
  "nan",
  "null",
  "none",
  "--",
  "---",
  "-",
  "n/a",
  "na",
  "...",
  "…",
  "—",
  "–",
]);
const IN_TEXTS = new Set(["nan", "null", "--", "---", "n/a", "…"]);

const MARKS = { numbers: IN_NUMBERS, texts: IN_TEXTS, ids: new Set<string>() };

/** What stands for a missing cell in one column, and how often. */
export type MissingCells = { isMissing: (cell: RawCell) => boolean; notes: string[] };

/**
 * Which cells of a column are missing: masked ones, empty ones, and those with a mark that says
 * so. Fewer marks are taken as such among texts, where `NA` may be a name, and none among ids.
 */
export function missingCells(
  table: Pick<RawTable, "columns" | "rows">,
  index: number,
  holds: "numbers" | "texts" | "ids",
): MissingCells {
  const marks = MARKS[holds];
  const found = new Map<string, { count: number; line: number }>();
  for (const { line, cells } of table.rows) {
    const cell = cells[index];
    if (typeof cell !== "string" || !marks.has(cell.toLowerCase())) continue;
    const seen = found.get(cell);
    if (seen === undefined) found.set(cell, { count: 1, line });
    else seen.count += 1;
  }
  const name = table.columns[index]!.name;
  return {
    isMissing: (cell) =>
      cell === null || cell === "" || (typeof cell === "string" && found.has(cell)),
    notes: [...found].map(([mark, { count, line }]) => {
      const cells = count === 1 ? "1 cell" : `${count} cells`;
      return `Column ${name}: "${mark}" is read as nothing there (${cells}, the first in line ${line}).`;
    }),
  };
}
