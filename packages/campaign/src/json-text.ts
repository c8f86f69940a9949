import { found } from "./form-words";
import type { Problem } from "./problem";
import { scanJson } from "./json-scan";

/** What a JSON text holds; `value` is undefined only where the text isn't JSON. */
export type ParsedText = { value: unknown; problems: Problem[] };

/**
 * Parses JSON text and says what JSON.parse doesn't: the line and column of a syntax error, and
 * members that stand twice in one object, of which JSON.parse silently keeps the last.
 */
export function parseJson(given: string): ParsedText {
  // A byte order mark is no JSON, but editors leave one; nothing is lost by passing over it.
  const text = given.startsWith("\uFEFF") ? given.slice(1) : given;
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch (error) {
    if (!(error instanceof SyntaxError)) throw error;
    return { value: undefined, problems: [syntaxProblem(text)] };
  }
  if (countMembers(value) === countNames(text)) return { value, problems: [] };
  return { value, problems: scanJson(text).duplicates.map(duplicateProblem) };
}

function syntaxProblem(text: string): Problem {
  const { offset, expected } = scanJson(text).fault ?? { offset: 0, expected: "JSON" };
  const before = text.slice(0, offset).split("\n");
  const where = `at line ${before.length}, column ${before.at(-1)!.length + 1}`;
  const character = text.codePointAt(offset);
  const what = character === undefined ? "the end" : found(String.fromCodePoint(character));
  return { pointer: "", code: "syntax", found: `${what} ${where}`, allowed: expected };
}

function duplicateProblem({ pointer, name }: { pointer: string; name: string }): Problem {
  const what = `the member ${found(name)} a second time`;
  return { pointer, code: "duplicate-member", found: what, allowed: "each member once" };
}

/** Members in a parsed value: what is left of them where one stood twice. */
function countMembers(value: unknown): number {
  let count = 0;
  const waiting: unknown[] = [value];
  while (waiting.length > 0) {
    const one = waiting.pop();
    if (typeof one !== "object" || one === null) continue;
    if (Array.isArray(one)) {
      for (const item of one) if (typeof item === "object") waiting.push(item);
    } else {
      for (const name of Object.keys(one)) {
        count += 1;
        const inner = (one as Record<string, unknown>)[name];
        if (typeof inner === "object") waiting.push(inner);
      }
    }
  }
  return count;
}

const QUOTE = 34;
const BACKSLASH = 92;
const COLON = 58;

/** Members named in a text that is JSON: its strings that a colon follows. */
function countNames(text: string): number {
  let count = 0;
  let at = text.indexOf('"');
  while (at >= 0) {
    let end = text.indexOf('"', at + 1);
    while (isEscaped(text, end)) end = text.indexOf('"', end + 1);
    let next = end + 1;
    while (text.charCodeAt(next) <= 32) next += 1;
    if (text.charCodeAt(next) === COLON) count += 1;
    at = text.indexOf('"', next);
  }
  return count;
}

/** Whether the quote stands behind an odd number of backslashes. */
function isEscaped(text: string, quote: number): boolean {
  let start = quote;
  while (text.charCodeAt(start - 1) === BACKSLASH) start -= 1;
  return (quote - start) % 2 === 1 && text.charCodeAt(quote) === QUOTE;
}
