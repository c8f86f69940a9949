import { create, parseDependencies } from "mathjs/number";
import type { MathNode } from "mathjs";

/**
 * mathjs, for its parser alone: nothing of it evaluates a text. The parser is made at the first
 * use, since most documents hold no expression. The import is a plain one, so that reading
 * stays synchronous: bundled, as every program is, it brings the parser's own modules and no others.
 */
let parser: ((text: string) => MathNode) | null = null;

/** @throws {SyntaxError} whose `char` is the place, from 1 */
export function parseText(text: string): MathNode {
  parser ??= create(parseDependencies!).parse as (text: string) => MathNode;
  return parser(text);
}
