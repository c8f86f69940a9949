import { MAX_CHARACTERS, MAX_LINE } from "./limits";
import type { TableProblem } from "./table";

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
      allowed:
        "text in UTF-8, or in UTF-16 with a byte order mark; a binary table is to be saved as one first",
    };
  }
  const long = longLine(text);
  if (long !== null) {
    return {
      line: long,
      column: null,
      found: `a line of more than ${MAX_LINE} characters`,
      allowed: `lines of at most ${MAX_LINE} characters`,
    };
  }
  const lost = text.indexOf("\ufffd");
  if (lost !== -1) {
    return {
      line: lineAt(text, lost),
      column: null,
      found: "a character that was lost in decoding (U+FFFD)",
      allowed: "text in UTF-8; save the file in that encoding",
    };
  }
  return null;
}

function longLine(text: string): number | null {
  if (text.length <= MAX_LINE) return null;
  const ends = /[\r\n]/g;
  let start = 0;
  for (;;) {
    const end = ends.exec(text)?.index ?? text.length;
    if (end - start > MAX_LINE) return lineAt(text, start);
    if (end === text.length) return null;
    start = end + 1;
  }
}

function lineAt(text: string, index: number): number {
  return text.slice(0, index).split(/\r\n|\n|\r/).length;
}
