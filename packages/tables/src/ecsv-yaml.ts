import { Lexer, parseDocument } from "yaml";
import type { TableProblem } from "./table";

/** Characters: a header says what 200 columns are, and holds what a pipeline wants to keep. */
const MAX_HEADER = 512 * 1024;
const MAX_TOKENS = 60_000;
/** Brackets in brackets, and indicators on a line: the library composes by recursion. */
const MAX_NESTING = 40;
const MAX_INDENT = 100;
/** Astropy's own headers repeat units by alias; a bomb repeats thousandfold. */
const MAX_ALIASES = 1000;

const SCALAR_FOLLOWS = "\u001f";

/**
 * YAML as maps, lists and texts, and nothing else: no tag means anything, and no text is taken for a
 * number or a truth value, so that a column may be called `no` or `1e5`. Nesting is looked at in the
 * tokens before anything is composed, which exhausts the stack otherwise.
 *
 * @param line the line of the file on which the YAML begins, from 1
 */
export function readYaml(yaml: string, line: number): Map<unknown, unknown> | TableProblem {
  const refused = (found: string, allowed: string, below = 0) => ({
    line: line + below,
    column: null,
    found,
    allowed,
  });
  if (yaml.length > MAX_HEADER) {
    return refused(`a header of ${yaml.length} characters`, `at most ${MAX_HEADER}`);
  }
  const excess = excessOf(yaml);
  if (excess !== null) return refused(...excess);
  try {
    const document = parseDocument(yaml, { schema: "failsafe", logLevel: "silent" });
    const [error] = document.errors;
    if (error !== undefined) {
      const reason = error.message.split("\n")[0]?.replace(/ at line \d+.*$/, "") ?? "";
      const below = (error.linePos?.[0].line ?? 1) - 1;
      return refused(`a header that isn't YAML: ${reason}`, "YAML 1.1 or 1.2", below);
    }
    const header: unknown = document.toJS({ mapAsMap: true, maxAliasCount: MAX_ALIASES });
    if (header instanceof Map) return header;
    return refused("a header without properties", "a YAML map with a `datatype` list");
  } catch (error) {
    // Thrown for aliases past the count or of nothing.
    const reason = error instanceof Error ? error.message : String(error);
    return refused(`a header that can't be read: ${reason}`, "YAML with a `datatype` list");
  }
}

function excessOf(yaml: string): [found: string, allowed: string] | null {
  let [tokens, open, onLine, isScalar, isLineStart] = [0, 0, 0, false, true];
  for (const token of new Lexer().lex(yaml)) {
    tokens += 1;
    if (tokens > MAX_TOKENS) return [`a header of more than ${MAX_TOKENS} YAML tokens`, "fewer"];
    if (token === "\n") onLine = 0;
    else if (isScalar) isScalar = false;
    else if (token === SCALAR_FOLLOWS) isScalar = true;
    else if (token === "[" || token === "{") open += 1;
    else if (token === "]" || token === "}") open = Math.max(0, open - 1);
    else if (open === 0 && (token === "-" || token === "?" || token === ":")) onLine += 1;
    else if (isLineStart && token.length > MAX_INDENT && token.trim() === "") {
      return [`a header indented by ${token.length}`, `at most ${MAX_INDENT}`];
    }
    isLineStart = token === "\n";
    if (Math.max(open, onLine) > MAX_NESTING) {
      return [`a header nested more than ${MAX_NESTING} deep`, `at most ${MAX_NESTING}`];
    }
  }
  return null;
}
