import { createHash } from "node:crypto";
import { readFile, stat } from "node:fs/promises";
import { basename } from "node:path";
import { MAX_BYTES } from "@weighhouse/tables/limits";
import type { TableProblem } from "@weighhouse/tables/table";
import type { ColumnMatch } from "@weighhouse/tables/table-match";
import { Refusal, wrongUsage } from "../refusal";
import { harmless } from "../terminal";
import { fileChunks } from "./parts";
import { tableRows } from "./table-rows";
import type { TableOptions } from "./table-rows";

/** What a file gives to send: lines of NDJSON, and where each of them stands in the file. */
export type RowFile = {
  /** SHA-256 of what is sent: the same for the same rows, whenever they are sent. */
  digest: string;
  bytes: number;
  chunks: () => Iterable<Uint8Array>;
  /** The file's line of a line that is sent, both from 1. */
  lineOf: (line: number) => number;
  /** How a table's columns were read; none of other files. */
  matches: ColumnMatch[];
  notes: string[];
};

const HEAD_BYTES = 1024 * 1024;
const MOST_PROBLEMS = 100;

/**
 * Opens a file of measurements: NDJSON of any size goes out as it is, any other table is read here.
 *
 * @throws {Refusal} 1 where rows of a table are refused, 2 where there is no such file
 */
export async function openRowFile(path: string, options: TableOptions): Promise<RowFile> {
  const bytes = await sizeOf(path);
  if (isLines(path)) return linesFile(path, bytes);
  if (bytes > MAX_BYTES) {
    throw new Refusal(1, [
      `${path}: found ${bytes} bytes; allowed ${MAX_BYTES} in a table, or NDJSON of any size`,
    ]);
  }
  const table = await tableRows(basename(path), new Uint8Array(await readFile(path)), options);
  if (table.problems.length > 0) throw refusedRows(path, table.problems, table.lines.length);
  if (table.lines.length === 0) {
    throw new Refusal(1, [`${path}: found no row with a result; allowed one or more`]);
  }
  const sent = Buffer.from(table.text, "utf8");
  return {
    digest: createHash("sha256").update(sent).digest("hex"),
    bytes: sent.length,
    chunks: () => [sent],
    lineOf: (line) => table.lines[line - 1] ?? line,
    matches: table.matches,
    notes: table.notes,
  };
}

/** A problem where it stands: the file, its line, its column. */
function placedLine(path: string, { line, column, found, allowed }: TableProblem): string {
  const place = [path, line, column].filter((one) => one !== null).join(":");
  return harmless(`${place}: found ${found}; allowed ${allowed}`);
}

/** The lines that tell problems, no more than a screenful or two of them. */
export function problemLines(path: string, problems: readonly TableProblem[]): string[] {
  const shown = problems.slice(0, MOST_PROBLEMS).map((problem) => placedLine(path, problem));
  const more = problems.length - shown.length;
  return more > 0 ? [...shown, `and ${more} more`] : shown;
}

function refusedRows(path: string, problems: TableProblem[], good: number): Refusal {
  const lines = problemLines(path, problems);
  return new Refusal(1, [...lines, `Nothing was sent; ${good} other rows can be read.`]);
}

async function sizeOf(path: string): Promise<number> {
  try {
    const status = await stat(path);
    if (status.isFile()) return status.size;
    throw wrongUsage(`found ${path}, which is no file; allowed the path of a file`);
  } catch (error) {
    if (error instanceof Refusal) throw error;
    const code = (error as NodeJS.ErrnoException).code ?? String(error);
    throw wrongUsage(`found no readable file ${path} (${code}); allowed the path of a file`);
  }
}

function linesFile(path: string, bytes: number): RowFile {
  const hash = createHash("sha256");
  for (const chunk of fileChunks(path)) hash.update(chunk);
  if (bytes === 0) throw new Refusal(1, [`${path}: found no row; allowed one or more`]);
  return {
    digest: hash.digest("hex"),
    bytes,
    chunks: () => fileChunks(path),
    lineOf: (line) => line,
    matches: [],
    notes: [],
  };
}

/** NDJSON by its name, or by a whole JSON object in its first line and more lines after it. */
function isLines(path: string): boolean {
  if (/\.(?:ndjson|jsonl)$/i.test(path)) return true;
  const [head] = fileChunks(path);
  if (head === undefined || head[0] !== 0x7b) return false;
  const end = head.subarray(0, HEAD_BYTES).indexOf(0x0a);
  if (end === -1 || Buffer.from(head.subarray(end)).toString().trim() === "") return false;
  try {
    JSON.parse(Buffer.from(head.subarray(0, end)).toString());
    return true;
  } catch (error) {
    if (error instanceof SyntaxError) return false;
    throw error;
  }
}
