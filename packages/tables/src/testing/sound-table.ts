import { expect } from "vitest";
import type { RawTable } from "../raw-table";
import type { TableProblem } from "../table";

/** What every reading gives: clear problems and nothing else, or a table whose cells are what its columns say. */
export function expectSound(table: RawTable): void {
  for (const { line, found, allowed } of table.problems) {
    expect(found).not.toBe("");
    expect(allowed).not.toBe("");
    if (line !== null) expect(line).toBeGreaterThan(0);
  }
  if (table.problems.length > 0) {
    expect(table.rows).toEqual([]);
    return;
  }
  for (const { line, cells, problems = [] } of table.rows) {
    for (const { found, allowed } of problems) {
      expect(found).not.toBe("");
      expect(allowed).not.toBe("");
    }
    expect(line).toBeGreaterThan(0);
    expect(cells).toHaveLength(table.columns.length);
    for (const [index, cell] of cells.entries()) {
      const kind = table.columns[index]?.kind;
      if (cell === null) continue;
      if (typeof cell === "number") expect(Number.isFinite(cell)).toBe(true);
      if (kind === "boolean") expect(cell).toBeTypeOf("boolean");
      if (kind === "text") expect(cell).toBeTypeOf("string");
      if (kind === "number") expect(["number", "string"]).toContain(typeof cell);
    }
  }
}

/** Problems of the table and of its rows, with their lines. */
export function faultsOf(table: RawTable): TableProblem[] {
  const rows = table.rows.flatMap(({ line, problems = [] }) =>
    problems.map((problem) => ({ line, ...problem })),
  );
  return [...table.problems, ...rows];
}
