export type WrittenCell = string | number | boolean | null;

/** A column as it is written: times are RFC 3339 in UTC, integers are within a double's exact ones. */
export type WrittenColumn = {
  name: string;
  kind: "text" | "number" | "integer" | "boolean" | "time";
  unit: string | null;
  /** IVOA UCD1+. */
  ucd: string | null;
  description: string | null;
};

/** Null: missing. */
export type WrittenTable = {
  columns: readonly WrittenColumn[];
  rows: readonly (readonly WrittenCell[])[];
};

/** @throws {RangeError} a row of another length than the columns, or a cell that isn't its column's kind */
export function checkWritten({ columns, rows }: WrittenTable): void {
  for (const [index, row] of rows.entries()) {
    if (row.length !== columns.length) {
      throw new RangeError(
        `row ${index} has ${row.length} cells; there are ${columns.length} columns`,
      );
    }
    for (const [at, { name, kind }] of columns.entries()) {
      const cell = row[at] ?? null;
      if (cell !== null && !FITS[kind](cell)) {
        throw new RangeError(`row ${index}, ${name}: ${String(cell)} is no ${kind}`);
      }
    }
  }
}

const FITS: Record<WrittenColumn["kind"], (cell: WrittenCell) => boolean> = {
  text: (cell) => typeof cell === "string",
  number: (cell) => typeof cell === "number" && Number.isFinite(cell),
  integer: (cell) => Number.isSafeInteger(cell),
  boolean: (cell) => typeof cell === "boolean",
  time: (cell) => typeof cell === "string" && cell.endsWith("Z"),
};
