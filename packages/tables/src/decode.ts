import { MAX_BYTES } from "./limits";
import type { TableProblem } from "./table";

/** A file's text, or why it has none; `notes` says what was taken for what. */
export type Decoded =
  | { text: string; notes: string[]; problem: null }
  | { text: null; notes: string[]; problem: TableProblem };

const NEWLINE = 10;

/**
 * Bytes as text: UTF-8, or UTF-16 where a byte order mark says so. Any other encoding is refused,
 * since nothing in a file of single bytes says which one it is.
 */
export function decodeText(bytes: Uint8Array): Decoded {
  if (bytes.length > MAX_BYTES) {
    return refused(null, `${bytes.length} bytes`, `at most ${MAX_BYTES}; part it into several`);
  }
  const kind = otherKind(bytes);
  if (kind !== null) {
    return refused(1, kind, "a table as text: CSV, ECSV, VOTable, NDJSON or JSON");
  }
  if (startsWith(bytes, 0xff, 0xfe)) return decodeUtf16(bytes, "utf-16le", "UTF-16 (LE)");
  if (startsWith(bytes, 0xfe, 0xff)) return decodeUtf16(bytes, "utf-16be", "UTF-16 (BE)");
  const text = decodeWhole(bytes, "utf-8");
  if (text !== null) return { text, notes: [], problem: null };
  return refused(
    lineOfFault(bytes),
    "bytes that aren't UTF-8",
    "text in UTF-8, or in UTF-16 with a byte order mark; save the file in one of them",
  );
}

function refused(line: number | null, found: string, allowed: string): Decoded {
  return { text: null, notes: [], problem: { line, column: null, found, allowed } };
}

function startsWith(bytes: Uint8Array, ...start: number[]): boolean {
  return start.every((byte, index) => bytes[index] === byte);
}

/** Files that are often taken for tables, by their first bytes. */
function otherKind(bytes: Uint8Array): string | null {
  if (startsWith(bytes, 0x1f, 0x8b)) return "a file compressed with gzip";
  if (startsWith(bytes, 0x50, 0x4b, 0x03, 0x04)) return "a ZIP archive, or a spreadsheet";
  if (startsWith(bytes, 0x25, 0x50, 0x44, 0x46)) return "a PDF";
  if (startsWith(bytes, ...[..."SIMPLE  ="].map((one) => one.charCodeAt(0)))) return "a FITS file";
  if (startsWith(bytes, 0xd0, 0xcf, 0x11, 0xe0)) return "a spreadsheet in a binary format";
  return null;
}

function decodeUtf16(bytes: Uint8Array, encoding: string, name: string): Decoded {
  const text = bytes.length % 2 === 0 ? decodeWhole(bytes, encoding) : null;
  if (text === null)
    return refused(null, `bytes that aren't ${name}`, "whole text in UTF-8 or UTF-16");
  return { text, notes: [`Read as ${name}, as its byte order mark says.`], problem: null };
}

function decodeWhole(bytes: Uint8Array, encoding: string): string | null {
  try {
    return new TextDecoder(encoding, { fatal: true }).decode(bytes);
  } catch (error) {
    if (!(error instanceof TypeError)) throw error;
    return null;
  }
}

/** No character of several bytes in UTF-8 has a line feed among them, so lines decode one by one. */
function lineOfFault(bytes: Uint8Array): number {
  let [line, start] = [1, 0];
  for (;;) {
    const end = bytes.indexOf(NEWLINE, start);
    const part = bytes.subarray(start, end === -1 ? bytes.length : end);
    if (end === -1 || decodeWhole(part, "utf-8") === null) return line;
    [line, start] = [line + 1, end + 1];
  }
}
