import type { Table } from "./document";

export type Operator = "+" | "-" | "*" | "/" | "^";
export type Comparison = "<" | "<=" | ">" | ">=";
export type LookUp = Pick<Table, "at" | "values">;

/**
 * An expression as a tree of our own. `slopes` of a look-up: along which of its axes the slope of
 * the cell is meant in place of the value.
 */
export type Tree =
  | { kind: "number"; value: number }
  | { kind: "name"; name: string }
  | { kind: "negative"; of: Tree }
  | { kind: "operation"; operator: Operator; a: Tree; b: Tree }
  | { kind: "choice"; comparison: Comparison; a: Tree; b: Tree; yes: Tree; no: Tree }
  | { kind: "call"; name: string; values: readonly Tree[] }
  | { kind: "look"; table: LookUp; at: readonly Tree[]; slopes: readonly boolean[] };

export const ZERO: Tree = { kind: "number", value: 0 };
export const ONE: Tree = { kind: "number", value: 1 };

/** Trees directly below one. */
export function partsOf(tree: Tree): readonly Tree[] {
  switch (tree.kind) {
    case "negative":
      return [tree.of];
    case "operation":
      return [tree.a, tree.b];
    case "choice":
      return [tree.a, tree.b, tree.yes, tree.no];
    case "call":
      return tree.values;
    case "look":
      return tree.at;
    default:
      return [];
  }
}

/** Every name in a tree, in the order in which they stand. Parts that are shared are seen once. */
export function namesIn(tree: Tree): Set<string> {
  const names = new Set<string>();
  const seen = new Set<Tree>();
  const visit = (one: Tree) => {
    if (seen.has(one)) return;
    seen.add(one);
    if (one.kind === "name") names.add(one.name);
    for (const part of partsOf(one)) visit(part);
  };
  visit(tree);
  return names;
}

/** How many parts a tree has; those that are shared count each time. */
export function sizeOf(tree: Tree): number {
  return partsOf(tree).reduce((size, part) => size + sizeOf(part), 1);
}

/** The tree with a number in place of some of its names; parts that are shared stay shared. */
export function withNumbers(tree: Tree, numbers: ReadonlyMap<string, number>): Tree {
  const done = new Map<Tree, Tree>();
  const put = (one: Tree): Tree => {
    const earlier = done.get(one);
    if (earlier !== undefined) return earlier;
    const made = rebuilt(one, put, numbers);
    done.set(one, made);
    return made;
  };
  return put(tree);
}

function rebuilt(
  tree: Tree,
  put: (part: Tree) => Tree,
  numbers: ReadonlyMap<string, number>,
): Tree {
  switch (tree.kind) {
    case "number":
      return tree;
    case "name": {
      const value = numbers.get(tree.name);
      return value === undefined ? tree : number(value);
    }
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

export function number(value: number): Tree {
  return { kind: "number", value };
}

export function call(name: string, ...values: Tree[]): Tree {
  return { kind: "call", name, values };
}

export function choice(comparison: Comparison, [a, b, yes, no]: [Tree, Tree, Tree, Tree]): Tree {
  return { kind: "choice", comparison, a, b, yes, no };
}

// The makers below drop exact zeros and ones and compute what is all numbers, and nothing else.

export function isNumber(tree: Tree, value: number): boolean {
  return tree.kind === "number" && tree.value === value;
}

export function plus(a: Tree, b: Tree): Tree {
  if (isNumber(a, 0)) return b;
  if (isNumber(b, 0)) return a;
  if (a.kind === "number" && b.kind === "number") return number(a.value + b.value);
  return { kind: "operation", operator: "+", a, b };
}

export function minus(a: Tree, b: Tree): Tree {
  if (isNumber(b, 0)) return a;
  if (isNumber(a, 0)) return negative(b);
  if (a.kind === "number" && b.kind === "number") return number(a.value - b.value);
  return { kind: "operation", operator: "-", a, b };
}

export function negative(of: Tree): Tree {
  if (of.kind === "number") return of.value === 0 ? ZERO : number(-of.value);
  return of.kind === "negative" ? of.of : { kind: "negative", of };
}

export function times(a: Tree, b: Tree): Tree {
  if (isNumber(a, 0) || isNumber(b, 0)) return ZERO;
  if (isNumber(a, 1)) return b;
  if (isNumber(b, 1)) return a;
  if (a.kind === "number" && b.kind === "number") return number(a.value * b.value);
  return { kind: "operation", operator: "*", a, b };
}

export function over(a: Tree, b: Tree): Tree {
  if (isNumber(a, 0)) return ZERO;
  if (isNumber(b, 1)) return a;
  return { kind: "operation", operator: "/", a, b };
}

export function power(a: Tree, b: Tree): Tree {
  if (isNumber(b, 0)) return ONE;
  if (isNumber(b, 1)) return a;
  return { kind: "operation", operator: "^", a, b };
}
