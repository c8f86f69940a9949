import type { Parameter } from "@weighhouse/campaign/document";
import { expressionOf, type Expression } from "@weighhouse/campaign/expression";
import type { Tree } from "@weighhouse/campaign/expression-tree";

/** Whether a parameter's prior is plain in its logarithm. */
export function isLogged({ prior }: Pick<Parameter, "prior">): boolean {
  return prior.family === "lognormal" || prior.family === "loguniform";
}

/**
 * An expression with 10^name in place of some names: a product of powers on a log10 scale is then
 * linear in them. Parts that are shared stay shared.
 *
 * @param names of which the log10 is meant in the answer
 */
export function inLogarithms(expression: Expression, names: ReadonlySet<string>): Expression {
  if (![...names].some((name) => expression.names.has(name))) return expression;
  const done = new Map<Tree, Tree>();
  const put = (one: Tree): Tree => {
    const earlier = done.get(one);
    if (earlier !== undefined) return earlier;
    const made = rebuilt(one, put, names);
    done.set(one, made);
    return made;
  };
  return expressionOf(put(expression.tree), expression.tables);
}

function rebuilt(tree: Tree, put: (part: Tree) => Tree, names: ReadonlySet<string>): Tree {
  switch (tree.kind) {
    case "number":
      return tree;
    case "name":
      return names.has(tree.name)
        ? { kind: "operation", operator: "^", a: { kind: "number", value: 10 }, b: tree }
        : tree;
    case "negative":
      return { ...tree, of: put(tree.of) };
    case "operation":
      return { ...tree, a: put(tree.a), b: put(tree.b) };
    case "choice":
      return { ...tree, a: put(tree.a), b: put(tree.b), yes: put(tree.yes), no: put(tree.no) };
    case "call":
      return { ...tree, values: tree.values.map(put) };
    case "look":
      return { ...tree, at: tree.at.map(put) };
  }
}
