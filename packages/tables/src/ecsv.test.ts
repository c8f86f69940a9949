import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { readEcsv } from "./ecsv";
import type { RawCell } from "./raw-table";

/** Written by astropy, and what astropy reads back: test/reference/tables/make-tables.py. */
const folder = new URL("../../../test/reference/tables/files/", import.meta.url);
const fileOf = (name: string) => readFileSync(new URL(name, folder), "utf8");

type Reference = {
  rows: number;
  columns: {
    name: string;
    unit: string | null;
    description: string | null;
    time?: { scale: string; format: string };
    cells: (RawCell | unknown[])[];
  }[];
};
const referenceOf = (name: string): Reference => JSON.parse(fileOf(`${name}.json`));
/** Astropy tells a NaN apart from a missing cell, and widens single precision, whose digits the file has. */
const sameAs = (name: string) => (cell: unknown) =>
  cell === "nan" ? null : name === "f4" && typeof cell === "number" ? Math.fround(cell) : cell;

const scalarFiles = readdirSync(folder).filter(
  (name) => name.endsWith(".ecsv") && !/subtypes|more-numbers|jd1/.test(name),
);

describe("a file by astropy is read as astropy reads it", () => {
  it.each(scalarFiles)("%s", (name) => {
    const table = readEcsv(fileOf(name));
    const reference = referenceOf(name);
    expect(table.problems).toEqual([]);
    expect(table.rows).toHaveLength(reference.rows);
    for (const expected of reference.columns) {
      const index = table.columns.findIndex((column) => column.name === expected.name);
      const column = table.columns[index];
      const unit = expected.name === "lag" ? "d" : expected.unit; // A TimeDelta's jd are days.
      expect(column).toMatchObject({ unit, description: expected.description });
      expect(column?.timeScale).toBe(expected.time?.scale ?? null);
      expect(column?.timeFormat).toBe(expected.time?.format.replace("isot", "iso") ?? null);
      const same = sameAs(expected.name);
      expect(table.rows.map(({ cells }) => same(cells[index]))).toEqual(expected.cells.map(same));
    }
  });
});
