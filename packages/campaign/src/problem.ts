/** Every way a document, a payload or a text can be refused. Closed: a new code must be handled by all. */
export type ProblemCode =
  | "syntax"
  | "duplicate-member"
  | "wrong-type"
  | "missing"
  | "unknown-property"
  | "bad-format"
  | "bad-choice"
  | "out-of-range"
  | "not-positive"
  | "unknown-key"
  | "duplicate"
  | "not-applicable"
  | "contradiction"
  | "outside-window"
  | "outside-condition"
  | "lacks-condition"
  | "wrong-dimension"
  | "bad-expression"
  | "impossible-reports"
  | "not-positive-definite"
  | "not-yet-supported";

/**
 * One thing that is wrong: where (JSON Pointer, RFC 6901; "" is the whole document), what was
 * found there, and what is allowed.
 */
export type Problem = { pointer: string; code: ProblemCode; found: string; allowed: string };

export type Result<T> = { ok: true; value: T } | { ok: false; problems: Problem[] };

/**
 * A problem as one line of text, the same on the command line, in the API and on pages: what it
 * quotes may hold line ends and control characters, which are written as JSON escapes.
 */
export function problemLine({ pointer, found, allowed }: Problem): string {
  const line = `${pointer === "" ? "(document)" : pointer}: found ${found}; allowed ${allowed}`;
  // oxlint-disable-next-line no-control-regex -- They are what is escaped.
  return line.replaceAll(/[\u0000-\u001f\u007f-\u009f\u2028\u2029]/g, (character) => {
    return `\\u${character.charCodeAt(0).toString(16).padStart(4, "0")}`;
  });
}
