import { CsvError, parse } from "csv-parse/sync";
import { MAX_CELLS, MAX_COLUMNS, MAX_ROWS } from "./limits";
import type { Separator, TableProblem } from "./table";
import { refusedText } from "./text";

export type CsvRecord = { line: number; cells: string[] };

export type CsvRecords = {
  separator: Separator;
  records: CsvRecord[];
  problems: TableProblem[];
  /** Lines that begin with `#`, and the last one above the first record. */
  comments: { count: number; above: { line: number; text: string } | null };
};

const NO_COMMENTS: CsvRecords["comments"] = { count: 0, above: null };

const NAMES: Record<Separator, string> = {
  ",": "commas",
  ";": "semicolons",
  "\t": "tabs",
  "|": "vertical bars",
};

/**
 * The records of a CSV text (RFC 4180), the header's first. Also read: semicolons, tabs or
 * vertical bars in place of commas, a byte order mark, LF or CR line ends, blank lines, and lines
 * that begin with `#` (common practice).
 */
export function readRecords(text: string): CsvRecords {
  const none = { separator: "," as const, records: [], comments: NO_COMMENTS };
  const refused = refusedText(text);
  if (refused !== null) return { ...none, problems: [refused] };
  const separator = detectSeparator(text);
  const many = tooManyCells(text, separator);
  if (many !== null) return { ...none, separator, problems: [many] };
  try {
    const { records, comments } = parseRecords(text, separator);
    return { separator, records, problems: sizeProblems(records), comments };
  } catch (error) {
    if (!(error instanceof CsvError)) throw error;
    return { ...none, separator, problems: [brokenQuotes(text, separator)] };
  }
}

/** The separator that the header line has most of, outside quotes; a comma where it has none. */
export function detectSeparator(text: string): Separator {
  const header =
    text
      .replace(/^\ufeff/, "")
      .split(/\r\n|\n|\r/, 1000)
      .find((line) => line.trim() !== "" && !line.startsWith("#")) ?? "";
  const bare = header.replaceAll(/"(?:[^"]|"")*"/g, "");
  const counted = ([",", ";", "\t", "|"] as const).map((separator) => ({
    separator,
    count: bare.split(separator).length - 1,
  }));
  return counted.reduce((best, next) => (next.count > best.count ? next : best)).separator;
}

type ParsedRecord = { record: string[]; raw: string };

const LINE_END = /\r\n|\n|\r/g;
const BLANK_AND_COMMENTS = /^(?:(?:#[^\r\n]*)?(?:\r\n|\n|\r))*/;

function parseRecords(
  text: string,
  separator: Separator,
): Pick<CsvRecords, "records" | "comments"> {
  const parsed = parse(text, {
    bom: true,
    comment: "#",
    comment_no_infix: true,
    delimiter: separator,
    raw: true,
    relax_column_count: true,
    skip_empty_lines: true,
    to: MAX_ROWS + 2,
  }) as unknown as ParsedRecord[];
  // The parser's own line count takes a CRLF inside quotes for two; `raw` runs through the whole
  // text, comments and blank lines before a record included.
  let [line, consumed] = [1, 0];
  const comments = { ...NO_COMMENTS };
  const records = parsed.map(({ record, raw }) => {
    const before = BLANK_AND_COMMENTS.exec(raw)?.[0] ?? "";
    if (consumed === 0) comments.above = lastComment(before);
    comments.count += countComments(before);
    const at = line + countLines(before);
    line += countLines(raw);
    consumed += raw.length;
    return { line: at, cells: record.map((cell) => cell.trim()) };
  });
  comments.count += countComments(text.slice(consumed));
  return { records: records.filter(({ cells }) => cells.some((cell) => cell !== "")), comments };
}

function countComments(text: string): number {
  return text.includes("#") ? (text.match(/^#/gm)?.length ?? 0) : 0;
}

function lastComment(before: string): CsvRecords["comments"]["above"] {
  const lines = before.split(LINE_END);
  const index = lines.findLastIndex((line) => line.startsWith("#"));
  return index === -1 ? null : { line: index + 1, text: lines[index]!.replace(/^#+\s*/, "") };
}

/** Counted before parsing: lines of a million separators would take more room than their text. */
function tooManyCells(text: string, separator: Separator): TableProblem | null {
  let count = 0;
  for (let at = text.indexOf(separator); at !== -1; at = text.indexOf(separator, at + 1))
    count += 1;
  if (count <= MAX_CELLS) return null;
  const found = `${count} ${NAMES[separator]}`;
  const allowed = `at most ${MAX_CELLS} cells in one file; part it into several`;
  return { line: null, column: null, found, allowed };
}

function countLines(text: string): number {
  return text.match(LINE_END)?.length ?? 0;
}

function sizeProblems(records: CsvRecord[]): TableProblem[] {
  const header = records[0];
  const problems: TableProblem[] = [];
  if (header === undefined) {
    problems.push({
      line: 1,
      column: null,
      found: "no line with a header",
      allowed: "a header line with the columns' names, then a line for each measurement",
    });
  } else if (header.cells.length > MAX_COLUMNS) {
    problems.push({
      line: header.line,
      column: null,
      found: `${header.cells.length} columns`,
      allowed: `at most ${MAX_COLUMNS}`,
    });
  }
  if (records.length > MAX_ROWS + 1) {
    problems.push({
      line: records[MAX_ROWS + 1]?.line ?? null,
      column: null,
      found: `more than ${MAX_ROWS} rows`,
      allowed: `at most ${MAX_ROWS} in one file; part it into several`,
    });
  }
  return problems;
}

function brokenQuotes(text: string, separator: Separator): TableProblem {
  const { line, open } = quoteError(text.replaceAll("\r\n", "\n"), separator);
  return {
    line,
    column: null,
    found: open
      ? "a quoted field that is never closed"
      : "a quote inside a field that isn't quoted, or text after a closing quote",
    allowed: `fields parted by ${NAMES[separator]}; one with a quote in it in quotes, its quotes doubled (RFC 4180)`,
  };
}

/** Parsed once more with single line ends, since the parser's count takes a CRLF in quotes for two. */
function quoteError(text: string, separator: Separator): { line: number | null; open: boolean } {
  try {
    parseRecords(text, separator);
  } catch (error) {
    if (!(error instanceof CsvError)) throw error;
    if (error.code === "CSV_QUOTE_NOT_CLOSED") return { line: lastOpened(text), open: true };
    return { line: (error as unknown as { lines: number }).lines, open: false };
  }
  return { line: null, open: false };
}

/** The line of the quote that is never closed; the parser reports the text's end. */
function lastOpened(text: string): number {
  let [open, opened] = [false, 0];
  text.split(/[\r\n]/).forEach((line, index) => {
    if (!open && line.startsWith("#")) return;
    for (const character of line) {
      if (character !== '"') continue;
      open = !open;
      if (open) opened = index + 1;
    }
  });
  return opened;
}
