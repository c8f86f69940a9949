import { utf8 } from "@weighhouse/ledger/bytes";
import type { ArchiveFile } from "./zip/write";

/**
 * A file of lines, made of bytes and not of one text: a million payloads are more than a string of
 * JavaScript may hold (2^29 characters).
 */
export function linesFile(path: string, lines: readonly string[]): ArchiveFile {
  const encoded = lines.map(utf8);
  const bytes = new Uint8Array(encoded.reduce((sum, line) => sum + line.length + 1, 0));
  let at = 0;
  for (const line of encoded) {
    bytes.set(line, at);
    bytes[at + line.length] = 0x0a;
    at += line.length + 1;
  }
  return { path, bytes };
}
