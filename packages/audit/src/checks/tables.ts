import { writeCsv } from "@weighhouse/tables/write-csv";
import type { CsvCell } from "@weighhouse/tables/write-csv";
import { readText } from "./archive-text";
import type { Files } from "./container";
import { readCells } from "./csv-cells";
import { counted, judged } from "./line";
import type { CheckLine } from "./line";
import { checkWritten } from "./written";
import { texFiles } from "../content";
import type { Substance } from "../content";
import { tablePath } from "../layout";
import { tablesOf } from "../tables";
import type { ArchiveTable } from "../tables";

/**
 * Each cell of `tables/*.csv` is the document's or the standings' value, numbers as numbers; and
 * `tables/*.tex` prints the same.
 */
export function checkTables(files: Files, substance: Substance): CheckLine {
  const { document, standings, timeline, manifest } = substance;
  const tables = tablesOf(document, standings, timeline);
  const faults = tables.flatMap((table) => tableFaults(files, table));
  const cells = tables.reduce((sum, { header, rows }) => sum + header.length * rows.length, 0);
  const printed = checkWritten(files, texFiles(substance), manifest.writer);
  return judged(
    "tables",
    [...faults, ...printed.faults],
    `${counted(tables.length, "table")}, ${cells} cells as computed; for print, ${printed.detail}`,
  );
}

function tableFaults(files: Files, table: ArchiveTable): string[] {
  const path = tablePath(table.name);
  const read = readText(files, path);
  if (!read.ok) return [read.fault];
  const expectedText = writeCsv(table.header, table.rows);
  if (read.text === expectedText) return [];
  if (read.text.length > 4 * expectedText.length + 4096) {
    return [`${path}: found ${read.text.length} characters, computed ${expectedText.length}`];
  }
  const records = readCells(read.text);
  if (typeof records === "string") return [`${path}, ${records}`];
  const expected: readonly (readonly CsvCell[])[] = [table.header, ...table.rows];
  if (records.length !== expected.length) {
    return [`${path}: found ${records.length - 1} rows, computed ${table.rows.length}`];
  }
  return records.flatMap(({ line, cells }, index) => {
    const row = expected[index] as readonly CsvCell[];
    if (cells.length !== row.length) {
      return [`${path}, line ${line}: found ${cells.length} cells, allowed ${row.length}`];
    }
    return cells.flatMap((found, column) => {
      const cell = row[column] as CsvCell;
      if (sameCell(found, cell)) return [];
      return [
        `${path}, line ${line}, ${table.header[column]}: found ${JSON.stringify(found)}, computed ${JSON.stringify(cell)}`,
      ];
    });
  });
}

function sameCell(found: string, cell: CsvCell): boolean {
  if (typeof cell === "number") return found !== "" && Number(found) === cell;
  return found === String(cell ?? "");
}
