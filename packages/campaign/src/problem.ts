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

/** A problem as one line of text, the same on the command line, in the API and on pages. */
export function problemLine(problem: Problem): string {
  return `${problem.pointer === "" ? "(document)" : problem.pointer}: found ${problem.found}; allowed ${problem.allowed}`;
}
