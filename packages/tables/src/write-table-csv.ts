import { writeCsv } from "./write-csv";
import { checkWritten } from "./written-table";
import type { WrittenTable } from "./written-table";

/**
 * A table as CSV (RFC 4180), units in the header: `value [Jy]`. Missing cells are empty, and so is a
 * text without letters; white space at a text's ends is lost when it is read, and a number or a
 * truth kept as text comes back as one.
 *
 * @throws {RangeError} as `checkWritten`, and for a unit with brackets in it
 */
export function writeTableCsv(table: WrittenTable): string {
  checkWritten(table);
  const header = table.columns.map(({ name, unit }) => {
    if (unit === null) return name;
    if (/[[\]]/.test(unit)) throw new RangeError(`the unit ${unit} of ${name} has brackets in it`);
    return `${name} [${unit}]`;
  });
  return writeCsv(header, table.rows);
}
