/**
 * The first look at an expression, before any parser: its characters, and how long, deep and large it
 * is. A parser's own recursion overflows long before a text's length says so.
 */
export const MAX_LENGTH = 2000;
export const MAX_DEPTH = 64;
export const MAX_NODES = 400;

export type Token = { kind: "number" | "name" | "sign"; text: string; at: number };
export type Fault = { found: string; allowed: string };

const TOKEN =
  /[ \t\r\n]+|(?<number>(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)|(?<name>[A-Za-z]\w*)|(?<sign><=|>=|[-+*/^()<>?:,])/y;

/** The tokens of an expression, or the first thing that none may hold. */
export function tokensOf(text: string): Token[] | Fault {
  if (text.length > MAX_LENGTH) {
    return { found: `${text.length} characters`, allowed: `at most ${MAX_LENGTH}` };
  }
  const tokens: Token[] = [];
  TOKEN.lastIndex = 0;
  while (TOKEN.lastIndex < text.length) {
    const at = TOKEN.lastIndex;
    const match = TOKEN.exec(text);
    if (match === null) return strange(text, at);
    for (const kind of ["number", "name", "sign"] as const) {
      const token = match.groups?.[kind];
      if (token !== undefined) tokens.push({ kind, text: token, at });
    }
  }
  return tooLarge(tokens) ?? tokens;
}

/** Where a token or a character stands, counted from 1. */
export function place(at: number): string {
  return `at character ${at + 1}`;
}

function strange(text: string, at: number): Fault {
  const character = String.fromCodePoint(text.codePointAt(at) ?? 0);
  return {
    found: `${JSON.stringify(character)} ${place(at)}`,
    allowed: "numbers, names, + - * / ^ ( ) , and one comparison < <= > >= with ? :",
  };
}

/**
 * Every node of the tree has one token of its own (a comparison's `:` and the parentheses and commas have none), so the
 * count is exact without a tree.
 */
function tooLarge(tokens: Token[]): Fault | null {
  let depth = 0;
  let nodes = 0;
  for (const { text, at } of tokens) {
    if (text === "(") depth += 1;
    else if (text === ")") depth -= 1;
    else if (text !== "," && text !== ":") nodes += 1;
    if (depth > MAX_DEPTH) {
      return { found: `parentheses ${depth} deep ${place(at)}`, allowed: `${MAX_DEPTH} at most` };
    }
  }
  return nodes > MAX_NODES ? { found: `${nodes} nodes`, allowed: `at most ${MAX_NODES}` } : null;
}
