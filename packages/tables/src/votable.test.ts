import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import type { RawCell } from "./raw-table";
import { readVotable } from "./votable";

/** Written by astropy, and what astropy reads back: test/reference/tables/make-tables.py. */
const folder = new URL("../../../test/reference/tables/files/", import.meta.url);
const bytesOf = (name: string) => new Uint8Array(readFileSync(new URL(name, folder)));

type Reference = {
  rows: number;
  columns: {
    name: string;
    unit: string | null;
    ucd?: string;
    description: string | null;
    cells: (RawCell | unknown[])[];
  }[];
};
const referenceOf = (name: string): Reference =>
  JSON.parse(readFileSync(new URL(`${name}.json`, folder), "utf8"));
/** Astropy gives no text as an empty one, widens single precision, and arrays as arrays. */
const sameAs = (name: string) => (cell: unknown) => {
  if (cell === "") return null;
  if (name === "f4" && typeof cell === "number") return Math.fround(cell);
  return Array.isArray(cell) ? cell.flat(9).join(" ") : cell;
};

const files = readdirSync(folder).filter((name) => name.endsWith(".vot") && name !== "failed.vot");

describe("a file by astropy is read as astropy reads it", () => {
  it.each(files)("%s", (name) => {
    const table = readVotable(bytesOf(name));
    const reference = referenceOf(name);
    expect(table.problems).toEqual([]);
    expect(table.rows).toHaveLength(reference.rows);
    expect(table.columns.map((column) => column.name)).toEqual(
      reference.columns.map((column) => column.name),
    );
    for (const [index, expected] of reference.columns.entries()) {
      const { unit, description, ucd = null } = expected;
      expect(table.columns[index]).toMatchObject({ unit, description, ucd });
      const same = sameAs(expected.name);
      expect(table.rows.map(({ cells }) => same(cells[index]))).toEqual(expected.cells.map(same));
    }
  });
});
