import { headerColumns, withUnit } from "./header";
import { ecsvRecords } from "./ecsv-records";
import { MAX_COLUMNS } from "./limits";
import { readNumber } from "./number-cells";
import type { RawColumn, RawRow, RawTable } from "./raw-table";
import { readRecords } from "./records";
import type { CsvRecord, CsvRecords } from "./records";
import type { Separator, TableProblem } from "./table";
import { isRule, readUnitsRow } from "./units-row";

type Parted = { records: CsvRecord[]; by: Separator | "spaces"; comments: CsvRecords["comments"] };

const NAMES: Record<Parted["by"], string> = {
  ",": "commas",
  ";": "semicolons",
  "\t": "tabs",
  "|": "vertical bars",
  spaces: "spaces",
};

/**
 * Reads a CSV text: cells stay text, as they are in the file. Told apart, and said in a note: cells
 * parted by something else than commas, a header in a comment line, a units row or a ruled line
 * under it, and comment lines, which are left out.
 */
export function readCsv(text: string): RawTable {
  const { separator, records, problems, comments } = readRecords(text);
  const empty: RawTable = { format: "csv", columns: [], rows: [], problems, notes: [] };
  if (problems.length > 0) return empty;
  const parted = inSpaces(text, records) ?? { records, by: separator };
  const { header, rows, notes, problem } = partHeader({ ...parted, comments });
  if (header === null) return { ...empty, problems: [problem] };
  if (parted.by !== ",") notes.unshift(`Cells are parted by ${NAMES[parted.by]}.`);
  return belowHeader({ ...empty, columns: headerColumns(header.cells), notes }, rows);
}

/** The same text in runs of spaces, where no separator parts it and its lines are all of one length. */
function inSpaces(text: string, records: CsvRecord[]): Omit<Parted, "comments"> | null {
  if (records.some(({ cells }) => cells.length !== 1) || !/\S\s+\S/.test(records[0]!.cells[0]!)) {
    return null;
  }
  const words = records[0]!.cells[0]!.split(/\s+/).length;
  const start = { at: text.startsWith("\ufeff") ? 1 : 0, line: 1 };
  const { records: spaced, problem } = ecsvRecords(text, start, { delimiter: " ", columns: words });
  const width = spaced[0]?.cells.length ?? 0;
  const isTable = problem === null && spaced.every(({ cells }) => cells.length === width);
  return isTable && width > 1 && width <= MAX_COLUMNS ? { records: spaced, by: "spaces" } : null;
}

type Header =
  | { header: CsvRecord; rows: CsvRecord[]; notes: string[]; problem: null }
  | { header: null; rows: CsvRecord[]; notes: string[]; problem: TableProblem };

/** The first line; where that is of numbers, the comment line above it with as many words. */
function partHeader({ records, by, comments }: Parted): Header {
  const [first, ...rows] = records as [CsvRecord, ...CsvRecord[]];
  const notes = (count: number) => (count === 0 ? [] : [`${lines(count)} left out.`]);
  const isNumber = (cell: string) =>
    readNumber(cell, "point") !== null || readNumber(cell, "comma") !== null;
  if (!first.cells.every(isNumber)) {
    return { header: first, rows, notes: notes(comments.count), problem: null };
  }
  const { above } = comments;
  const cells = above?.text.split(by === "spaces" ? /\s+/ : by).map((cell) => cell.trim()) ?? [];
  if (above !== null && cells.length === first.cells.length && !cells.some(isNumber)) {
    const note = `Line ${above.line}, a comment, is read as the header.`;
    const header = { line: above.line, cells };
    return { header, rows: records, notes: [note, ...notes(comments.count - 1)], problem: null };
  }
  const allowed = "a header line with the columns' names, then a line for each measurement";
  const problem = { line: first.line, column: null, found: "a first line of numbers", allowed };
  return { header: null, rows, notes: [], problem };
}

function lines(count: number): string {
  return count === 1 ? "1 comment line is" : `${count} comment lines are`;
}

/** What stands between the header and the rows: their units, a ruled line. */
function belowHeader(table: RawTable, records: CsvRecord[]): RawTable {
  let { columns } = table;
  const notes = [...table.notes];
  let rows = records;
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
  return { ...table, columns, notes, rows: rows.map((record) => rawRow(record, columns)) };
}

function rawRow({ line, cells }: CsvRecord, columns: RawColumn[]): RawRow {
  const expected = columns.length;
  const texts = cells.map((cell) => (cell === "" ? null : cell));
  if (cells.length === expected) return { line, cells: texts };
  const found = `${cells.length} ${cells.length === 1 ? "cell" : "cells"}`;
  const allowed = `${expected}, as in the header`;
  return { line, cells: texts, problems: [{ column: null, found, allowed }] };
}
