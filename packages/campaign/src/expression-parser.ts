import { create, parseDependencies } from "mathjs/number";
import type { MathNode } from "mathjs";

/**
 * mathjs, for its parser alone: nothing of it evaluates a text. Made at the first use, since
 * most documents hold no expression.
 */
let parser: ((text: string) => MathNode) | null = null;

/** @throws {SyntaxError} whose `char` is the place, from 1 */
export function parseText(text: string): MathNode {
  parser ??= create(parseDependencies!).parse as (text: string) => MathNode;
  return parser(text);
}
