import { expect } from "vitest";
import type { RawTable } from "../raw-table";

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
  for (const { line, cells } of table.rows) {
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
