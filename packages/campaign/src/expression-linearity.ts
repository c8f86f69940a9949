import { derivativeOf } from "./expression-derivative";
import { expressionOf } from "./expression";
import type { Expression } from "./expression";
import {
  ZERO,
  call,
  minus,
  namesIn,
  number,
  over,
  plus,
  times,
  withNumbers,
} from "./expression-tree";
import type { Tree } from "./expression-tree";

/**
 * An expression in scoring space (itself, or its log10), apart into what is linear in some of its
 * names and the rest:
 *
 *   scored(names) = base + sum_p slopes[p] * p
 *
 * Neither the base nor any slope names a linear one.
 */
export type Design = { base: Expression; slopes: ReadonlyMap<string, Expression> };

/**
 * Which of the candidates enter an expression linearly in scoring space, chosen in their order:
 * one is taken when its derivative names neither itself nor one taken before, and no derivative
 * taken before names it. So of `p * q` the first is linear and the second isn't.
 *
 * The derivative is symbolic and unsimplified: what it still names counts as used, even where it
 * would cancel. That of a choice or a look-up keeps its condition or its coordinate, which bars
 * what these name. A candidate that the expression doesn't name isn't among the answers.
 *
 * @param inLog10 whether the scale is log10: the derivative is then that of log10(expression),
 *   taken by the rules of the logarithm through products, quotients, powers, roots and exp, so
 *   that of `10^(a + b*x)` both a and b are linear
 */
export function linearParameters(
  expression: Expression,
  candidates: readonly string[],
  inLog10: boolean,
): string[] {
  const taken: string[] = [];
  const barred = new Set<string>();
  for (const candidate of candidates) {
    if (!expression.names.has(candidate) || barred.has(candidate)) continue;
    const slope = namesIn(scoredDerivative(expression.tree, candidate, inLog10));
    if (slope.has(candidate) || taken.some((earlier) => slope.has(earlier))) continue;
    taken.push(candidate);
    for (const name of slope) barred.add(name);
  }
  return taken;
}

/**
 * The design of an expression whose `linear` names came from `linearParameters`.
 *
 * @param linear names that enter linearly, all at 0 in the base
 */
export function designOf(
  expression: Expression,
  linear: readonly string[],
  inLog10: boolean,
): Design {
  const { tree, tables } = expression;
  const atZero = withNumbers(tree, new Map(linear.map((name) => [name, 0])));
  return {
    base: expressionOf(inLog10 ? call("log10", atZero) : atZero, tables),
    slopes: new Map(
      linear.map((name) => [name, expressionOf(scoredDerivative(tree, name, inLog10), tables)]),
    ),
  };
}

function scoredDerivative(tree: Tree, name: string, inLog10: boolean): Tree {
  if (!inLog10) return derivativeOf(tree, name);
  return over(derivativeOfLog(tree, name), number(Math.LN10));
}

/** The derivative of ln(tree), by the rules of the logarithm where the tree has its form. */
function derivativeOfLog(tree: Tree, name: string): Tree {
  const derivative = derivativeOf(tree, name);
  if (derivative === ZERO || !namesIn(tree).has(name)) return ZERO;
  if (tree.kind === "operation") {
    const { operator, a, b } = tree;
    switch (operator) {
      case "*":
        return plus(derivativeOfLog(a, name), derivativeOfLog(b, name));
      case "/":
        return minus(derivativeOfLog(a, name), derivativeOfLog(b, name));
      case "^":
        return plus(times(b, derivativeOfLog(a, name)), times(derivativeOf(b, name), logOf(a)));
      default:
    }
  }
  if (tree.kind === "call" && tree.name === "exp") return derivativeOf(tree.values[0]!, name);
  if (tree.kind === "call" && tree.name === "sqrt") {
    return over(derivativeOfLog(tree.values[0]!, name), number(2));
  }
  return over(derivative, tree);
}

function logOf(tree: Tree): Tree {
  return tree.kind === "number" ? number(Math.log(tree.value)) : call("log", tree);
}
