import { functions } from "./expression-words";
import type { Comparison, Operator, Tree } from "./expression-tree";
import { interpolate } from "./interpolation";

export type Scope = Readonly<Record<string, number>>;

/**
 * A tree as one closure for each of its parts.
 *
 * @param leaf how a name's value is found in what the closure is called with
 */
export function closureOf<V>(
  tree: Tree,
  leaf: (name: string) => (values: V) => number,
): (values: V) => number {
  const made = new Map<Tree, (values: V) => number>();
  const make = (one: Tree): ((values: V) => number) => {
    const earlier = made.get(one);
    if (earlier !== undefined) return earlier;
    const closure = closureOfPart(one, make, leaf);
    made.set(one, closure);
    return closure;
  };
  return make(tree);
}

function closureOfPart<V>(
  tree: Tree,
  make: (part: Tree) => (values: V) => number,
  leaf: (name: string) => (values: V) => number,
): (values: V) => number {
  switch (tree.kind) {
    case "number": {
      const { value } = tree;
      return () => value;
    }
    case "name":
      return leaf(tree.name);
    case "negative": {
      const of = make(tree.of);
      return (values) => -of(values);
    }
    case "operation": {
      const { operator, a, b } = tree;
      if (b.kind === "number") return byNumber(operator, make(a), b.value);
      if (a.kind === "number") return ofNumber(operator, a.value, make(b));
      return operationOf(operator, make(a), make(b));
    }
    case "choice": {
      const compare = comparisons[tree.comparison];
      const [a, b, yes, no] = [make(tree.a), make(tree.b), make(tree.yes), make(tree.no)];
      return (values) => (compare(a(values), b(values)) ? yes(values) : no(values));
    }
    case "call":
      return callOf(tree.name, tree.values.map(make));
    case "look":
      return lookOf(tree, tree.at.map(make));
  }
}

const comparisons: Readonly<Record<Comparison, (a: number, b: number) => boolean>> = {
  "<": (a, b) => a < b,
  "<=": (a, b) => a <= b,
  ">": (a, b) => a > b,
  ">=": (a, b) => a >= b,
};

type Closure<V> = (values: V) => number;

/** A call less, and for the commonest powers no logarithm. */
function byNumber<V>(operator: Operator, a: Closure<V>, b: number): Closure<V> {
  switch (operator) {
    case "+":
      return (values) => a(values) + b;
    case "-":
      return (values) => a(values) - b;
    case "*":
      return (values) => a(values) * b;
    case "/":
      return (values) => a(values) / b;
    case "^":
      if (b === -1) return (values) => 1 / a(values);
      if (b === 2) {
        return (values) => {
          const value = a(values);
          return value * value;
        };
      }
      return (values) => a(values) ** b;
  }
}

function ofNumber<V>(operator: Operator, a: number, b: Closure<V>): Closure<V> {
  switch (operator) {
    case "+":
      return (values) => a + b(values);
    case "-":
      return (values) => a - b(values);
    case "*":
      return (values) => a * b(values);
    case "/":
      return (values) => a / b(values);
    case "^":
      return (values) => a ** b(values);
  }
}

function operationOf<V>(operator: Operator, a: Closure<V>, b: Closure<V>): Closure<V> {
  switch (operator) {
    case "+":
      return (values) => a(values) + b(values);
    case "-":
      return (values) => a(values) - b(values);
    case "*":
      return (values) => a(values) * b(values);
    case "/":
      return (values) => a(values) / b(values);
    case "^":
      return (values) => a(values) ** b(values);
  }
}

function callOf<V>(name: string, parts: Closure<V>[]): Closure<V> {
  const { call } = functions.get(name)!;
  const [first, second] = parts as [Closure<V>, Closure<V>];
  if (parts.length === 1) return (values) => call(first(values));
  if (parts.length === 2) return (values) => call(first(values), second(values));
  return (values) => call(...parts.map((part) => part(values)));
}

function lookOf<V>(
  { table, slopes }: Extract<Tree, { kind: "look" }>,
  parts: Closure<V>[],
): Closure<V> {
  const [first, second] = parts as [Closure<V>, Closure<V> | undefined];
  if (second === undefined) return (values) => interpolate(table, slopes, first(values));
  return (values) => interpolate(table, slopes, first(values), second(values));
}
