import {
  ONE,
  ZERO,
  call,
  choice,
  isNumber,
  minus,
  namesIn,
  negative,
  number,
  over,
  plus,
  power,
  times,
} from "./expression-tree";
import type { Tree } from "./expression-tree";

/**
 * The symbolic derivative of a tree by one name.
 *
 * Exact zeros and ones are dropped and nothing else is simplified, so a derivative that is the
 * number 0 means that the value doesn't hang on the name: a choice or a look-up that does keeps
 * its condition or its coordinate. Of a look-up: the slope of the cell. Of `? :`, abs, min and max: that of the branch
 * which holds (at a crossing, of the one that is taken there). Of u ^ v: v u^(v-1) u' + u^v ln(u) v',
 * whose second part is 0 at u = 0 and doesn't exist below.
 *
 * Parts of the tree are shared, never copied: the result is at most a few times as large.
 */
export function derivativeOf(tree: Tree, name: string): Tree {
  const done = new Map<Tree, Tree>();
  const d = (one: Tree): Tree => {
    const earlier = done.get(one);
    if (earlier !== undefined) return earlier;
    const made = derivativeOfPart(one, name, d);
    done.set(one, made);
    return made;
  };
  return d(tree);
}

type Derive = (tree: Tree) => Tree;

function derivativeOfPart(tree: Tree, name: string, d: Derive): Tree {
  switch (tree.kind) {
    case "number":
      return ZERO;
    case "name":
      return tree.name === name ? ONE : ZERO;
    case "negative":
      return negative(d(tree.of));
    case "operation":
      return ofOperation(tree, d);
    case "choice": {
      const { comparison, a, b } = tree;
      const [yes, no] = [d(tree.yes), d(tree.no)];
      const fixed = isNumber(yes, 0) && isNumber(no, 0);
      if (fixed && !namesIn(a).has(name) && !namesIn(b).has(name)) return ZERO;
      return choice(comparison, [a, b, yes, no]);
    }
    case "call":
      return ofCall(tree.name, tree.values, d);
    case "look":
      return ofLook(tree, d);
  }
}

function ofOperation(tree: Extract<Tree, { kind: "operation" }>, d: Derive): Tree {
  const { operator, a: u, b: v } = tree;
  const [du, dv] = [d(u), d(v)];
  switch (operator) {
    case "+":
      return plus(du, dv);
    case "-":
      return minus(du, dv);
    case "*":
      return plus(times(du, v), times(u, dv));
    case "/":
      return over(minus(du, times(isNumber(dv, 0) ? ZERO : tree, dv)), v);
    case "^": {
      const byBase = times(times(v, power(u, minus(v, ONE))), du);
      if (isNumber(dv, 0)) return byBase;
      const above = times(times(tree, call("log", u)), dv);
      const none = choice("<", [u, ZERO, number(Number.NaN), ZERO]);
      const byPower =
        u.kind === "number" && u.value > 0 ? above : choice(">", [u, ZERO, above, none]);
      return plus(byBase, byPower);
    }
  }
}

function ofCall(name: string, values: readonly Tree[], d: Derive): Tree {
  const [u, v] = values as [Tree, Tree];
  if (name === "min" || name === "max") return ofExtreme(name, values, d);
  if (name === "atan2") {
    return over(minus(times(v, d(u)), times(u, d(v))), plus(times(u, u), times(v, v)));
  }
  const du = d(u);
  return isNumber(du, 0) ? ZERO : ofOne(name, u, du);
}

function ofOne(name: string, u: Tree, du: Tree): Tree {
  switch (name) {
    case "sqrt":
      return over(du, times(number(2), call("sqrt", u)));
    case "exp":
      return times(call("exp", u), du);
    case "log":
      return over(du, u);
    case "log10":
      return over(du, times(u, number(Math.LN10)));
    case "sin":
      return times(call("cos", u), du);
    case "cos":
      return negative(times(call("sin", u), du));
    case "tan":
      return over(du, times(call("cos", u), call("cos", u)));
    case "asin":
      return over(du, call("sqrt", minus(ONE, times(u, u))));
    case "acos":
      return negative(over(du, call("sqrt", minus(ONE, times(u, u)))));
    case "atan":
      return over(du, plus(ONE, times(u, u)));
    case "abs":
      return choice("<", [u, ZERO, negative(du), du]);
    default:
      throw new Error(`no derivative of ${name} is known`);
  }
}

/** Of the first value that is the least (or the greatest). */
function ofExtreme(name: "min" | "max", values: readonly Tree[], d: Derive): Tree {
  const [first, ...rest] = values as [Tree, ...Tree[]];
  const dFirst = d(first);
  if (rest.length === 0) return dFirst;
  const dRest = ofExtreme(name, rest, d);
  if (isNumber(dFirst, 0) && isNumber(dRest, 0)) return ZERO;
  const comparison = name === "min" ? "<=" : ">=";
  return choice(comparison, [first, call(name, ...rest), dFirst, dRest]);
}

/** The chain rule over the axes; a cell is straight along each, so a second slope along one is 0. */
function ofLook(tree: Extract<Tree, { kind: "look" }>, d: Derive): Tree {
  let sum: Tree = ZERO;
  for (const [axis, coordinate] of tree.at.entries()) {
    const inner = d(coordinate);
    if (isNumber(inner, 0)) continue;
    const slopes = tree.slopes.map((slope, one) => slope || one === axis);
    const slope: Tree = tree.slopes[axis] ? flat(tree) : { ...tree, slopes };
    sum = plus(sum, times(slope, inner));
  }
  return sum;
}

/** Zero, but for outside of the table; it still hangs on the coordinate. */
function flat(tree: Tree): Tree {
  return { kind: "operation", operator: "*", a: ZERO, b: tree };
}
