export type CsvCell = string | number | boolean | null;

/**
 * CSV text by RFC 4180: CRLF line ends, the header first, fields with a comma, quote or line break
 * quoted and their quotes doubled. Null is an empty field; numbers have the fewest digits that read
 * back the same.
 *
 * @throws {RangeError} a row of another length than the header, or a number that isn't finite
 */
export function writeCsv(header: readonly string[], rows: readonly (readonly CsvCell[])[]): string {
  const lines = [header, ...rows].map((row, index) => {
    if (row.length !== header.length) {
      throw new RangeError(
        `row ${index} has ${row.length} fields; the header has ${header.length}`,
      );
    }
    return row.map(field).join(",");
  });
  return lines.map((line) => `${line}\r\n`).join("");
}

function field(cell: CsvCell): string {
  if (cell === null) return "";
  if (typeof cell === "number" && !Number.isFinite(cell)) {
    throw new RangeError(`${cell} is not a finite number`);
  }
  const text = String(cell);
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}
