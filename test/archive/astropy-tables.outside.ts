import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import * as fc from "fast-check";
import { afterAll, describe, expect, it } from "vitest";
import { measurementSchema } from "@weighhouse/campaign/measurement";
import { measurementTable } from "@weighhouse/tables/measurement-table";
import { manyQuantities } from "@weighhouse/tables/testing/harbour";
import { hardTable } from "@weighhouse/tables/testing/written-tables";
import { writeEcsv } from "@weighhouse/tables/write-ecsv";
import { writeVotable } from "@weighhouse/tables/write-votable";
import type { WrittenCell, WrittenColumn, WrittenTable } from "@weighhouse/tables/written-table";

const folder = mkdtempSync(path.join(tmpdir(), "weighhouse-tables-"));
afterAll(() => rmSync(folder, { recursive: true }));

type Read = {
  name: string;
  unit: string | null;
  ucd: string | null;
  description: string | null;
  scale?: string;
  cells: (string | number | boolean | null)[];
};

/** Debian's Python and its astropy, without variables and folders of the user's. */
function astropyReads(name: string, text: string): Read[] {
  const file = path.join(folder, name);
  writeFileSync(file, text);
  const program = path.join(import.meta.dirname, "read_tables.py");
  const run = spawnSync("/usr/bin/python3", ["-I", program, file], { env: { HOME: folder } });
  expect(run.stderr.toString()).toBe("");
  return (JSON.parse(run.stdout.toString()) as Read[][])[0] ?? [];
}

/** Invented: results of all forms, with what is missing in each. */
const measured = measurementTable(
  [
    { id: "a:1", value: 8.1, sd: 0.6, batch: "n", conditions: { depth: 12 } },
    { id: "a:2", value: 4.4e-300, plus: 0.5, minus: 0.3, status: "provisional", extra: { n: 1 } },
    { id: "a:3", value: 20, limit: "upper", confidence: 0.95, source: "doi:10.0/x, \u00a74" },
    { id: "a:4", value: -0.4, sd: 1, noise: "linear", extra: { n: -1.5, clear: true } },
    { id: "a:5", count: 6, exposure: 2, shared: [{ error: "zero" }], extra: { clear: false } },
    { id: "a:7", value: 3, sdDex: 0.1 },
    { id: "a:6", occurred: true, setAside: { reason: 'says "no"\nand why' } },
  ].map((given, index) =>
    measurementSchema.parse({
      measurand: "flux-may",
      observedAt: index === 3 ? null : `2031-05-0${index + 1}T06:00:00.${index}25Z`,
      facility: "north-raft",
      ...given,
    }),
  ),
  manyQuantities,
);

const anyNumbers: fc.Arbitrary<WrittenCell[]> = fc.tuple(
  fc.option(fc.double({ noNaN: true, noDefaultInfinity: true })),
  fc.option(fc.maxSafeInteger()),
  fc.option(fc.boolean()),
);
/** Doubles and integers of all sizes. */
const numbers: WrittenTable = {
  columns: (["number", "integer", "boolean"] as const).map((kind) => ({
    name: kind,
    kind,
    unit: null,
    ucd: null,
    description: null,
  })),
  rows: fc.sample(anyNumbers, { numRuns: 500, seed: 1 }),
};

const tables: [name: string, table: WrittenTable][] = [
  ["measured", measured],
  ["numbers", numbers],
  ["hard", hardTable],
];
const ways: [ending: string, write: (table: WrittenTable) => string][] = [
  ["ecsv", writeEcsv],
  ["tabledata.vot", (table) => writeVotable(table, { serialization: "TABLEDATA" })],
  ["binary2.vot", (table) => writeVotable(table, { serialization: "BINARY2" })],
];

describe.each(ways)("astropy reads the same out of .%s", (ending, write) => {
  it.each(tables)("%s", (name, table) => {
    const read = astropyReads(`${name}.${ending}`, write(table));
    expect(read.map((column) => column.name)).toEqual(table.columns.map((column) => column.name));
    for (const [at, column] of table.columns.entries()) {
      const found = read[at] as Read;
      const isEcsv = ending === "ecsv";
      const { kind, ucd, description } = column;
      // Astropy calls the unit 1 nothing.
      expect(found).toMatchObject({
        unit: column.unit === "1" ? "" : column.unit,
        ucd,
        description,
      });
      expect(found.scale).toBe(kind === "time" && isEcsv ? "utc" : undefined);
      expect(found.cells.map((cell) => sameAs(cell, kind))).toEqual(
        table.rows.map((row) => sameAs(row[at] ?? null, kind)),
      );
    }
  });
});

/** VOTable's missing texts are empty ones to astropy, its times text; integers come as digits. */
function sameAs(cell: string | number | boolean | null, kind: WrittenColumn["kind"]): unknown {
  if (cell === null || cell === "") return null;
  if (kind === "integer") return String(cell);
  if (kind !== "time") return cell;
  const [whole = "", fraction = ""] = String(cell).replace(/Z$/, "").split(".");
  return `${whole}.${fraction.padEnd(9, "0")}`;
}
