import { readCsv } from "./csv";
import { decodeText } from "./decode";
import { readDocument } from "./document";
import { MAX_ROWS } from "./limits";
import { parseDraftLine } from "./ndjson";
import type { DraftRow, DraftTable, RawTable } from "./raw-table";
import type { TableProblem } from "./table";
import { readEcsv } from "./ecsv";
import { refusedText } from "./text";
import { readVotable } from "./votable";

/**
 * Reads a file of any format, told by its content; the name only tells NDJSON with one line from
 * a JSON document. The file is refused as a whole where it is too long, no text, or broken.
 */
export function readTable(name: string, bytes: Uint8Array): RawTable | DraftTable {
  if (isXml(bytes)) return readVotable(bytes);
  const { text, notes, problem } = decodeText(bytes);
  if (text === null) return unreadable(problem);
  const read = readText(name, text.replace(/^\ufeff/, ""));
  return { ...read, notes: [...notes, ...read.notes] };
}

/** The same of a text. */
export function readText(name: string, text: string): RawTable | DraftTable {
  const start = text.slice(0, 2000).trimStart();
  const refused = refusedText(text);
  if (refused !== null) return unreadable(refused);
  if (start.startsWith("{") || start.startsWith("[")) {
    return isLines(name, text) ? readLines(text) : readDocument(text);
  }
  return /^#\s*%ECSV\b/.test(start) ? readEcsv(text) : readCsv(text);
}

/** XML says its encoding itself, so it is read from its bytes. */
function isXml(bytes: Uint8Array): boolean {
  const start = bytes.subarray(0, 1000).filter((byte) => byte !== 0);
  return /^(?:\u00ef\u00bb\u00bf|\u00ff\u00fe|\u00fe\u00ff)?\s*</.test(
    String.fromCharCode(...start),
  );
}

function unreadable(problem: TableProblem): RawTable {
  return { format: "csv", columns: [], rows: [], problems: [problem], notes: [] };
}

/** NDJSON has a whole JSON object in its first line; a document hardly ever, and then no other line. */
function isLines(name: string, text: string): boolean {
  if (/\.(?:ndjson|jsonl)$/i.test(name)) return true;
  const [first = "", ...others] = text.trim().split("\n", 2);
  if (others.length === 0 || !first.startsWith("{")) return false;
  try {
    JSON.parse(first);
    return true;
  } catch (error) {
    if (!(error instanceof SyntaxError)) throw error;
    return false;
  }
}

function readLines(text: string): DraftTable {
  const rows: DraftRow[] = [];
  const table: DraftTable = { format: "ndjson", columns: [], rows, problems: [], notes: [] };
  const lines = text.split("\n");
  for (const [index, line] of lines.entries()) {
    const row = parseDraftLine(line, index + 1);
    if (row !== null) rows.push(row);
    if (rows.length <= MAX_ROWS) continue;
    const allowed = `at most ${MAX_ROWS} in one file; part it into several`;
    const found = `more than ${MAX_ROWS} rows`;
    return { ...table, rows: [], problems: [{ line: index + 1, column: null, found, allowed }] };
  }
  return table;
}
