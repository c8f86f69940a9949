export type CsvLine = { line: number; cells: string[] };

/**
 * The cells of a CSV text by RFC 4180, strictly as this archive's tables are written: CRLF line
 * ends, quotes only around a whole field. Own code because the reader of posted tables needs Node's
 * Buffer, and this check runs in browsers.
 *
 * @returns each record with the line on which it begins, or what breaks the form
 */
export function readCells(text: string): CsvLine[] | string {
  const records: CsvLine[] = [];
  const field = /("(?:[^"]|"")*"|[^",\r\n]*)(,|\r\n)/y;
  let line = 1;
  let record: CsvLine = { line, cells: [] };
  while (field.lastIndex < text.length) {
    const match = field.exec(text);
    if (match === null) return `line ${line}: found a field or a line end that is not RFC 4180`;
    const [whole, raw, end] = match as unknown as [string, string, string];
    record.cells.push(raw.startsWith('"') ? raw.slice(1, -1).replaceAll('""', '"') : raw);
    line += whole.split("\n").length - 1;
    if (end === ",") continue;
    records.push(record);
    record = { line, cells: [] };
  }
  return record.cells.length === 0 ? records : `line ${line}: found no line end`;
}
