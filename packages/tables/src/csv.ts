import { headerColumns, withUnit } from "./header";
import type { RawColumn, RawRow, RawTable } from "./raw-table";
import { readRecords } from "./records";
import type { CsvRecord } from "./records";
import type { Separator } from "./table";
import { readUnitsRow, isRule } from "./units-row";

const NAMES: Record<Separator, string> = {
  ",": "commas",
  ";": "semicolons",
  "\t": "tabs",
  "|": "vertical bars",
};

/**
 * Reads a CSV text: cells stay text, as they are in the file. A units row, or a ruled line, under
 * the header is told apart and said so.
 */
export function readCsv(text: string): RawTable {
  const { separator, records, problems } = readRecords(text);
  const empty: RawTable = { format: "csv", columns: [], rows: [], problems, notes: [] };
  const [header, ...others] = records;
  if (problems.length > 0 || header === undefined) return empty;
  const notes = separator === "," ? [] : [`Cells are parted by ${NAMES[separator]}.`];
  let columns = headerColumns(header.cells);
  let rows = others;
  const units = readUnitsRow(columns, rows);
  if (units !== null) {
    columns = columns.map((column, index) => withUnit(column, units[index] ?? null));
    notes.push(`Line ${rows[0]!.line} is read as the columns' units.`);
    rows = rows.slice(1);
  }
  if (rows[0] !== undefined && isRule(rows[0])) {
    notes.push(`Line ${rows[0].line} is read as a ruled line.`);
    rows = rows.slice(1);
  }
  return { ...empty, columns, notes, rows: rows.map((record) => rawRow(record, columns)) };
}

function rawRow({ line, cells }: CsvRecord, columns: RawColumn[]): RawRow {
  const expected = columns.length;
  const texts = cells.map((cell) => (cell === "" ? null : cell));
  if (cells.length === expected) return { line, cells: texts };
  const found = `${cells.length} ${cells.length === 1 ? "cell" : "cells"}`;
  const allowed = `${expected}, as in the header`;
  return { line, cells: texts, problems: [{ column: null, found, allowed }] };
}
