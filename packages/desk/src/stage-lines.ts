import { isUtf8 } from "node:buffer";
import type { Measurement } from "@weighhouse/campaign/document";
import { parseJson } from "@weighhouse/campaign/json-text";
import { MeasurementText } from "@weighhouse/campaign/measurement-text";
import type { ReadRow } from "./read-rows";

/** A row; one that was plain enough to be read as it came has its measurement, as the schema reads it. */
export type GivenRow = ReadRow & { measurement?: Measurement };

/** Rows of a stream as they come, and how many bytes had come with them. */
export type Piece = { rows: GivenRow[]; bytes: number };

/** The longest line that is read: what is longer could be no entry anyway. */
export const LONGEST_LINE = 1_048_576;
const ROWS_AT_A_TIME = 2000;
const NEWLINE = 10;

/**
 * Measurements out of newline-delimited JSON that comes in chunks, a piece at a time. What is held
 * is a piece, whatever the stream's length; a line that isn't a measurement's JSON is a row refused, and after
 * one that doesn't end nothing more is read.
 */
export async function* linePieces(bytes: AsyncIterable<Uint8Array>): AsyncGenerator<Piece> {
  const lines = new LineRows();
  let read = 0;
  let rows: GivenRow[] = [];
  for await (const chunk of bytes) {
    read += chunk.byteLength;
    for (const row of lines.push(chunk)) rows.push(row);
    if (rows.length >= ROWS_AT_A_TIME || lines.isOver) {
      yield { rows, bytes: read };
      rows = [];
    }
    if (lines.isOver) return;
  }
  for (const row of lines.end()) rows.push(row);
  yield { rows, bytes: read };
}

class LineRows {
  /** No more is read: a line was too long. */
  isOver = false;
  #line = 0;
  #begun: Uint8Array[] = [];
  #begunBytes = 0;
  readonly #reader = new MeasurementText();

  push(chunk: Uint8Array): GivenRow[] {
    const end = chunk.lastIndexOf(NEWLINE) + 1;
    const rows = end === 0 ? [] : this.#rowsOf([...this.#begun, chunk.subarray(0, end)]);
    if (end > 0) [this.#begun, this.#begunBytes] = [[], 0];
    this.#begun.push(chunk.subarray(end));
    this.#begunBytes += chunk.byteLength - end;
    if (this.#begunBytes <= LONGEST_LINE) return rows;
    this.isOver = true;
    this.#begun = [];
    return [...rows, tooLong(this.#line + 1)];
  }

  end(): GivenRow[] {
    return this.#begunBytes === 0 ? [] : this.#rowsOf(this.#begun);
  }

  #rowsOf(parts: Uint8Array[]): GivenRow[] {
    const block = Buffer.concat(parts);
    const rows: GivenRow[] = [];
    for (const line of isUtf8(block) ? block.toString().split("\n") : separate(block)) {
      this.#line += 1;
      const row = typeof line === "string" ? this.#rowOf(line) : notText(this.#line);
      if (row !== null) rows.push(row);
    }
    // Behind the last newline nothing is left, and the next chunk goes on there.
    if (block.at(-1) === NEWLINE) this.#line -= 1;
    return rows;
  }

  #rowOf(given: string): GivenRow | null {
    const line = this.#line;
    if (given.length > LONGEST_LINE) return tooLong(line);
    const { cursor } = this.#reader;
    cursor.turnTo(given);
    const plain = this.#reader.next();
    if (plain !== null && plain.postedAt === null) {
      cursor.space();
      if (cursor.isAtEnd()) return { line, draft: plain, problems: [], measurement: plain };
    }
    return carefully(given, line);
  }
}

/** What isn't plain is parsed as a whole, for its value or for what is wrong with it. */
function carefully(given: string, line: number): ReadRow | null {
  const text = given.endsWith("\r") ? given.slice(0, -1) : given;
  if (text.trim() === "" || (line === 1 && text === "\uFEFF")) return null;
  if (text.includes("\u0000")) {
    return refused(line, "U+0000 in the line", "JSON in UTF-8, a measurement on each line");
  }
  const { value, problems } = parseJson(text);
  if (problems.length > 0) {
    const faults = problems.map(({ found, allowed }) => ({
      column: null,
      found: found.replace("at line 1, column", "at column"),
      allowed,
    }));
    return { line, draft: null, problems: faults };
  }
  if (typeof value !== "object" || value === null || Array.isArray(value)) {
    const found = value === null ? "null" : Array.isArray(value) ? "a list" : `a ${typeof value}`;
    return refused(line, found, "an object with a measurement's fields");
  }
  return { line, draft: value as Record<string, unknown>, problems: [] };
}

/** Lines of which one or more aren't UTF-8: those as they came. */
function* separate(block: Buffer): Generator<string | Buffer> {
  for (let begin = 0; begin <= block.length;) {
    const found = block.indexOf(NEWLINE, begin);
    const end = found === -1 ? block.length : found;
    const line = block.subarray(begin, end);
    yield isUtf8(line) ? line.toString() : line;
    begin = end + 1;
  }
}

function notText(line: number): ReadRow {
  return refused(line, "bytes that are not UTF-8", "JSON in UTF-8");
}

function tooLong(line: number): ReadRow {
  const allowed = `lines of at most ${LONGEST_LINE} bytes, a measurement on each`;
  return refused(line, `a line longer than ${LONGEST_LINE} bytes`, allowed);
}

function refused(line: number, found: string, allowed: string): ReadRow {
  return { line, draft: null, problems: [{ column: null, found, allowed }] };
}
