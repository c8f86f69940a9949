import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { readEcsv } from "./ecsv";
import type { RawTable } from "./raw-table";
import { anyTable, hardTable } from "./testing/written-tables";
import { readVotable } from "./votable";
import { writeEcsv } from "./write-ecsv";
import { writeVotable } from "./write-votable";
import type { WrittenTable } from "./written-table";

const bytes = (text: string) => new TextEncoder().encode(text);
const ways: [way: string, through: (table: WrittenTable) => RawTable][] = [
  ["ECSV", (table) => readEcsv(writeEcsv(table))],
  ["TABLEDATA", (table) => readVotable(bytes(writeVotable(table, { serialization: "TABLEDATA" })))],
  ["BINARY2", (table) => readVotable(bytes(writeVotable(table, { serialization: "BINARY2" })))],
];

/** As a reader gives what was written. */
function expectSame(read: RawTable, { columns, rows }: WrittenTable): void {
  expect(read.problems).toEqual([]);
  // Line ends of a description are layout to XML's readers.
  const oneLine = (text: string | null) => text?.replaceAll(/\s+/g, " ") ?? null;
  const told = read.columns.map((column) => ({
    ...column,
    description: oneLine(column.description),
  }));
  expect(told).toMatchObject(
    columns.map(({ kind, description, ...column }) => ({
      ...column,
      description: oneLine(description),
      kind: kind === "integer" ? "number" : kind,
      timeScale: kind === "time" ? "utc" : null,
      timeFormat: kind === "time" ? "iso" : null,
    })),
  );
  expect(read.rows.map(({ cells }) => cells)).toEqual(
    rows.map((row) =>
      row.map((cell, at) =>
        columns[at]?.kind === "time" && typeof cell === "string" ? cell.slice(0, -1) : cell,
      ),
    ),
  );
}

describe.each(ways)("what is written as %s is read as it was", (_, through) => {
  it("with everything that is hard", () => {
    expectSame(through(hardTable), hardTable);
  });

  it("without rows", () => {
    const empty = { ...hardTable, rows: [] };
    expectSame(through(empty), empty);
  });

  it("whatever it is", () => {
    fc.assert(
      fc.property(anyTable, (table) => expectSame(through(table), table)),
      { numRuns: 200, seed: 1 },
    );
  });
});

describe("what can't be written is refused", () => {
  const column = { name: "a", unit: null, ucd: null, description: null };
  const faults: [kind: WrittenTable["columns"][number]["kind"], cell: string | number | boolean][] =
    [
      ["number", Number.NaN],
      ["number", Number.POSITIVE_INFINITY],
      ["integer", 2 ** 53],
      ["integer", 0.5],
      ["text", 1],
      ["boolean", "true"],
      ["time", "2031-03-01T06:00:00"],
    ];
  it.each(faults)("in a column of kind %s, %s", (kind, cell) => {
    const table = { columns: [{ ...column, kind }], rows: [[cell]] };
    expect(() => writeEcsv(table)).toThrow(`row 0, a: ${String(cell)} is no ${kind}`);
    expect(() => writeVotable(table, { serialization: "BINARY2" })).toThrow(RangeError);
  });

  it("a row of another length", () => {
    const table: WrittenTable = { columns: [{ ...column, kind: "text" }], rows: [["x", "y"]] };
    expect(() => writeEcsv(table)).toThrow("row 0 has 2 cells; there are 1 columns");
  });
});

it("letters that XML can't hold are lost marks in TABLEDATA, and kept in BINARY2", () => {
  const table: WrittenTable = {
    columns: [{ name: "a", kind: "text", unit: null, ucd: null, description: null }],
    rows: [["x\u0001\ufffe\ud800y"], [" z\r\n"]],
  };
  const cellsIn = (serialization: "TABLEDATA" | "BINARY2") =>
    readVotable(bytes(writeVotable(table, { serialization }))).rows.map(({ cells }) => cells[0]);
  expect(cellsIn("TABLEDATA")).toEqual(["x\ufffd\ufffd\ufffdy", "z"]);
  expect(cellsIn("BINARY2")).toEqual(["x\u0001\ufffe\ufffdy", " z\r\n"]);
});
