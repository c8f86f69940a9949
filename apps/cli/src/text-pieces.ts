import { closeSync, openSync, readSync } from "node:fs";

/** Measured: shorter pieces take longer, longer ones more memory. */
const PIECE_BYTES = 2 ** 19;

/**
 * A file's text in pieces, cut between letters.
 *
 * @throws {TypeError} where its bytes aren't UTF-8
 */
export function* textPieces(path: string): Generator<string> {
  // Not a streaming decoder: Node's takes several times as long.
  const decoder = new TextDecoder("utf-8", { fatal: true, ignoreBOM: true });
  const bytes = new Uint8Array(PIECE_BYTES);
  const file = openSync(path, "r");
  try {
    let held = 0;
    for (;;) {
      const read = readSync(file, bytes, held, bytes.length - held, null);
      const filled = held + read;
      const end = read === 0 ? filled : endOfLetters(bytes, filled);
      yield decoder.decode(bytes.subarray(0, end));
      if (read === 0) return;
      bytes.copyWithin(0, end, filled);
      held = filled - end;
    }
  } finally {
    closeSync(file);
  }
}

/** Without a letter of several bytes at the end, which may be cut (RFC 3629, section 3). */
function endOfLetters(bytes: Uint8Array, filled: number): number {
  let end = filled;
  while (end > 0 && (bytes[end - 1]! & 0xc0) === 0x80) end -= 1;
  if (end > 0 && bytes[end - 1]! >= 0xc0) return end - 1;
  return end === 0 ? filled : end;
}
