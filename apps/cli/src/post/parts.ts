import { createHash } from "node:crypto";
import { closeSync, openSync, readSync } from "node:fs";

/** What one part of an upload holds at most. */
export const PART_BYTES = 8 * 1024 * 1024;
const READ_BYTES = 1024 * 1024;

/** Whole lines of NDJSON that are sent together. */
export type Part = {
  /** From 1. */
  number: number;
  bytes: Uint8Array;
  sha256: string;
  /** The number of its first line in the whole, from 1. */
  firstLine: number;
  lines: number;
};

/** Says which line is too long for any part. */
export class LineTooLong extends Error {
  readonly line: number;

  constructor(line: number) {
    super(`line ${line} is longer than ${PART_BYTES} bytes`);
    this.line = line;
  }
}

/**
 * Cuts NDJSON at line ends into parts of at most 8 MiB, holding no more than one at a time. The same
 * bytes give the same parts, so that a run that broke off is known by what is there.
 *
 * @throws {LineTooLong}
 */
export function* partsOf(chunks: Iterable<Uint8Array>): Generator<Part> {
  let [number, firstLine] = [1, 1];
  const partOf = (bytes: Uint8Array): Part => {
    const lines = countLines(bytes);
    const part = { number, bytes, sha256: sha256Of(bytes), firstLine, lines };
    number += 1;
    firstLine += lines;
    return part;
  };
  let held: Uint8Array[] = [];
  let length = 0;
  for (const chunk of chunks) {
    held.push(chunk);
    length += chunk.length;
    while (length > PART_BYTES) {
      const bytes = Buffer.concat(held);
      const end = bytes.lastIndexOf(0x0a, PART_BYTES - 1) + 1;
      if (end === 0) throw new LineTooLong(firstLine);
      yield partOf(bytes.subarray(0, end));
      held = [bytes.subarray(end)];
      length -= end;
    }
  }
  if (length > 0) yield partOf(Buffer.concat(held));
}

/** A file's bytes, some at a time. */
export function* fileChunks(path: string): Generator<Uint8Array> {
  const file = openSync(path, "r");
  try {
    for (;;) {
      const bytes = new Uint8Array(READ_BYTES);
      const read = readSync(file, bytes, 0, bytes.length, null);
      if (read === 0) return;
      yield bytes.subarray(0, read);
    }
  } finally {
    closeSync(file);
  }
}

/** A last line without an end counts too. */
function countLines(bytes: Uint8Array): number {
  let count = bytes.at(-1) === 0x0a ? 0 : 1;
  for (let at = bytes.indexOf(0x0a); at !== -1; at = bytes.indexOf(0x0a, at + 1)) count += 1;
  return count;
}

function sha256Of(bytes: Uint8Array): string {
  return createHash("sha256").update(bytes).digest("hex");
}
