import type { Prediction, Table } from "./document";
import { derivativeOf } from "./expression-derivative";
import { readTokens } from "./expression-reader";
import type { Vocabulary } from "./expression-reader";
import { tokensOf } from "./expression-tokens";
import type { Fault } from "./expression-tokens";
import { namesIn } from "./expression-tree";
import type { Tree } from "./expression-tree";
import { closureOf } from "./expression-values";
import type { Scope } from "./expression-values";

export type { Scope, Vocabulary };

/**
 * A function of named numbers. `names`: those that it uses, in the order in which they stand.
 * `tables`: those that it looks values up in.
 */
export type Expression = {
  readonly tree: Tree;
  readonly names: ReadonlySet<string>;
  readonly tables: ReadonlySet<string>;
  evaluate(scope: Scope): number;
  /** The symbolic derivative by one name: see `derivativeOf`. */
  derivative(name: string): Expression;
};

export type Compiled = { ok: true; expression: Expression } | { ok: false; faults: Fault[] };

/**
 * Compiles an expression of the campaign format to a tree of our own.
 *
 * Allowed: numbers, names, + - * / ^ (from the right, before unary minus), parentheses, unary
 * minus, a comparison as the condition of ? :, the functions and constants of the format and
 * `table(key, x[, y])`. At most 2,000 characters, 64 parentheses deep, 400 nodes.
 *
 * The value is NaN or infinite where the mathematics is (a root of a negative number, a division by zero) and
 * NaN outside a table.
 */
export function compileExpression(text: string, vocabulary: Vocabulary): Compiled {
  const tokens = tokensOf(text);
  if (!Array.isArray(tokens)) return { ok: false, faults: [tokens] };
  if (tokens.length === 0) {
    return { ok: false, faults: [{ found: "an empty text", allowed: "an expression" }] };
  }
  const read = readTokens(tokens, vocabulary);
  if (!read.ok) return read;
  return { ok: true, expression: expressionOf(read.tree, read.tables) };
}

/** An expression from its tree, compiled at the first use of each of its forms. */
export function expressionOf(tree: Tree, tables: ReadonlySet<string>): Expression {
  let closure: ((scope: Scope) => number) | null = null;
  return {
    tree,
    tables,
    names: namesIn(tree),
    evaluate(scope) {
      closure ??= closureOf<Scope>(tree, (name) => (values) => values[name] ?? Number.NaN);
      return closure(scope);
    },
    derivative: (name) => expressionOf(derivativeOf(tree, name), tables),
  };
}

/**
 * An expression for hot loops: names are places in an array, nothing is allocated.
 *
 * @param names what stands at each place; a name of the expression that isn't among them is NaN
 */
export function compileSlots(
  expression: Expression,
  names: readonly string[],
): (values: Float64Array) => number {
  const places = new Map(names.map((name, place) => [name, place]));
  return closureOf<Float64Array>(expression.tree, (name) => {
    const place = places.get(name);
    return place === undefined ? () => Number.NaN : (values) => values[place]!;
  });
}

/**
 * The value of a prediction's `expected` where it is a number or an expression without names of
 * the hypothesis: what an engine needs no parameters and no conditions for.
 *
 * @returns null where nothing is expected, or its value hangs on names
 */
export function constantExpected(
  prediction: Pick<Prediction, "expected">,
  tables: readonly Table[] = [],
): number | null {
  const { expected } = prediction;
  if (typeof expected !== "string") return expected;
  const compiled = compileExpression(expected, {
    names: new Set(),
    tables: new Map(tables.map((table) => [table.key, table])),
  });
  return compiled.ok ? compiled.expression.evaluate({}) : null;
}
