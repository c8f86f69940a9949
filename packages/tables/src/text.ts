import { MAX_CHARACTERS } from "./limits";
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
      allowed: "text in UTF-8; UTF-16 files and binary tables are to be saved as UTF-8 first",
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

function lineAt(text: string, index: number): number {
  return text.slice(0, index).split(/\r\n|\n|\r/).length;
}
