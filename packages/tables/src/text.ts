import { MAX_CHARACTERS } from "./limits";
import type { TableProblem } from "./table";

/** Bytes of a table file as text; other encodings than UTF-8 are refused, never guessed. */
export function decodeTable(
  bytes: Uint8Array,
): { ok: true; text: string } | { ok: false; problem: TableProblem } {
  const [first, second] = bytes;
  if ((first === 0xff && second === 0xfe) || (first === 0xfe && second === 0xff)) {
    return refused(1, "a UTF-16 byte order mark");
  }
  try {
    return { ok: true, text: new TextDecoder("utf-8", { fatal: true }).decode(bytes) };
  } catch {
    return refused(firstForeignLine(bytes), "bytes that are not UTF-8");
  }
}

/** What makes a text no table at all: too long, a NUL, or marks of a wrong decoding. */
export function refusedText(text: string): TableProblem | null {
  if (text.length > MAX_CHARACTERS) {
    return {
      line: null,
      column: null,
      found: `${text.length} characters`,
      allowed: `at most ${MAX_CHARACTERS} in one file; part it into several`,
    };
  }
  const nul = text.indexOf("\0");
  if (nul !== -1) {
    return {
      line: lineAt(text, nul),
      column: null,
      found: "a NUL character (U+0000)",
      allowed: "text in UTF-8; UTF-16 files and binary tables are to be saved as UTF-8 first",
    };
  }
  const replaced = text.indexOf("\ufffd");
  if (replaced !== -1) {
    return refused(lineAt(text, replaced), "a character that was lost in decoding (U+FFFD)")
      .problem;
  }
  return null;
}

function refused(line: number, found: string): { ok: false; problem: TableProblem } {
  const allowed = "text in UTF-8; save the file in that encoding";
  return { ok: false, problem: { line, column: null, found, allowed } };
}

function lineAt(text: string, index: number): number {
  return text.slice(0, index).split(/\r\n|\n|\r/).length;
}

/** Finds where decoding fails by halving: a prefix that ends inside a character may still be good. */
function firstForeignLine(bytes: Uint8Array): number {
  let [good, bad] = [0, bytes.length];
  while (bad - good > 1) {
    const middle = (good + bad) >> 1;
    try {
      new TextDecoder("utf-8", { fatal: true }).decode(bytes.subarray(0, middle), { stream: true });
      good = middle;
    } catch {
      bad = middle;
    }
  }
  let line = 1;
  for (const byte of bytes.subarray(0, good)) if (byte === 0x0a) line++;
  return line;
}
