import type { LookUp, Tree } from "./expression-tree";

/** Bounds that hold every value; null where there is none, whatever the names are. */
export type Range = { lower: number; upper: number } | null;

const ANY: Range = { lower: -Infinity, upper: Infinity };
const NONE: Range = null;

/**
 * Bounds on what an expression can be while its names stay inside theirs: interval arithmetic
 * (Moore, Interval Analysis, 1966). They hold but may be wide, since each mention of a name counts
 * as another; where they are null, the expression has no value anywhere in the box.
 *
 * Bounds are rounded to nearest, so they are off by a few units in the last place.
 */
export function rangeOf(tree: Tree, names: ReadonlyMap<string, Range>): Range {
  switch (tree.kind) {
    case "number":
      return exactly(tree.value);
    case "name":
      return names.get(tree.name) ?? NONE;
    case "negative": {
      const of = rangeOf(tree.of, names);
      return of === null ? NONE : { lower: -of.upper, upper: -of.lower };
    }
    case "operation":
      return ofOperation(tree, rangeOf(tree.a, names), rangeOf(tree.b, names));
    case "choice":
      return ofChoice(tree, names);
    case "call":
      return ofCall(
        tree.name,
        tree.values.map((value) => rangeOf(value, names)),
      );
    case "look":
      return ofLook(
        tree.table,
        tree.slopes,
        tree.at.map((value) => rangeOf(value, names)),
      );
  }
}

type Bounds = { lower: number; upper: number };

function exactly(value: number): Range {
  return Number.isNaN(value) ? NONE : { lower: value, upper: value };
}

function ofOperation(tree: Extract<Tree, { kind: "operation" }>, a: Range, b: Range): Range {
  if (a === null || b === null) return NONE;
  switch (tree.operator) {
    case "+":
      return bounds(a.lower + b.lower, a.upper + b.upper);
    case "-":
      return bounds(a.lower - b.upper, a.upper - b.lower);
    case "*":
      return around(products(a, b));
    case "/":
      if (b.lower <= 0 && b.upper >= 0) return b.lower === b.upper ? overZero(a) : ANY;
      return around(products(a, { lower: 1 / b.upper, upper: 1 / b.lower }));
    case "^":
      return ofPower(a, b);
  }
}

/** 0 / 0 has no value; anything else over 0 is infinite, which another step may make finite. */
function overZero(a: Bounds): Range {
  return a.lower === 0 && a.upper === 0 ? NONE : ANY;
}

function ofPower(base: Bounds, power: Bounds): Range {
  if (base.lower > 0) return around(corners(base, power, (u, v) => u ** v));
  const n = power.lower;
  if (n !== power.upper) return ANY;
  if (n === 0) return exactly(1);
  if (Number.isInteger(n)) {
    if (n < 0) return base.lower === 0 && base.upper === 0 ? ANY : flat(base, n);
    const ends = around([base.lower ** n, base.upper ** n]);
    if (ends === null || n % 2 !== 0 || base.upper < 0) return ends;
    return { lower: 0, upper: ends.upper };
  }
  // A broken power of what is below zero has no value.
  if (base.upper < 0) return NONE;
  return n < 0 ? { lower: base.upper ** n, upper: Infinity } : { lower: 0, upper: base.upper ** n };
}

/** A negative whole power, of a base that may be 0. */
function flat(base: Bounds, n: number): Range {
  return base.upper < 0 ? around([base.lower ** n, base.upper ** n]) : ANY;
}

function ofChoice(
  { comparison, a, b, yes, no }: Extract<Tree, { kind: "choice" }>,
  names: ReadonlyMap<string, Range>,
): Range {
  const [left, right] = [rangeOf(a, names), rangeOf(b, names)];
  // Comparisons with what has no value don't hold.
  if (left === null || right === null) return rangeOf(no, names);
  const below = comparison === "<" || comparison === "<=";
  const [small, large] = below ? [left, right] : [right, left];
  const strict = comparison === "<" || comparison === ">";
  const always = strict ? small.upper < large.lower : small.upper <= large.lower;
  const never = strict ? small.lower >= large.upper : small.lower > large.upper;
  const certain = !mayFail(a) && !mayFail(b);
  if (always && certain) return rangeOf(yes, names);
  if (never) return rangeOf(no, names);
  return union(rangeOf(yes, names), rangeOf(no, names));
}

/** Whether a tree may be without a value somewhere: anything but sums and products of names. */
function mayFail(tree: Tree): boolean {
  switch (tree.kind) {
    case "number":
    case "name":
      return false;
    case "negative":
      return mayFail(tree.of);
    case "operation":
      return !["+", "-", "*"].includes(tree.operator) || mayFail(tree.a) || mayFail(tree.b);
    default:
      return true;
  }
}

function ofCall(name: string, ranges: Range[]): Range {
  const values: Bounds[] = [];
  for (const range of ranges) {
    if (range === null) return NONE;
    values.push(range);
  }
  const [u] = values as [Bounds];
  switch (name) {
    case "sqrt":
      return u.upper < 0 ? NONE : rising(Math.sqrt, { ...u, lower: Math.max(0, u.lower) });
    case "log":
    case "log10":
      if (u.upper < 0) return NONE;
      return rising(name === "log" ? Math.log : Math.log10, { ...u, lower: Math.max(0, u.lower) });
    case "exp":
    case "atan":
      return rising(name === "exp" ? Math.exp : Math.atan, u);
    case "asin":
    case "acos": {
      if (u.upper < -1 || u.lower > 1) return NONE;
      const inside = { lower: Math.max(-1, u.lower), upper: Math.min(1, u.upper) };
      return around([Math[name](inside.lower), Math[name](inside.upper)]);
    }
    case "sin":
    case "cos":
      return u.lower === u.upper ? exactly(Math[name](u.lower)) : { lower: -1, upper: 1 };
    case "atan2":
      return { lower: -Math.PI, upper: Math.PI };
    case "abs":
      if (u.lower >= 0) return u;
      return { lower: Math.max(0, -u.upper), upper: Math.max(-u.lower, u.upper) };
    case "min":
    case "max":
      return {
        lower: Math[name](...values.map(({ lower }) => lower)),
        upper: Math[name](...values.map(({ upper }) => upper)),
      };
    default:
      return ANY;
  }
}

/** Between a table's least and greatest value, where its axes are reached at all. */
function ofLook({ at, values }: LookUp, slopes: readonly boolean[], places: Range[]): Range {
  for (const [axis, place] of places.entries()) {
    const points = at[axis] ?? [];
    if (place === null || place.upper < points[0]! || place.lower > points.at(-1)!) return NONE;
  }
  if (slopes.includes(true)) return ANY;
  let range: Range = NONE;
  for (const row of values) {
    for (const value of Array.isArray(row) ? row : [row]) range = union(range, exactly(value));
  }
  return range;
}

function rising(call: (value: number) => number, { lower, upper }: Bounds): Range {
  return { lower: call(lower), upper: call(upper) };
}

function products(a: Bounds, b: Bounds): number[] {
  // 0 times an infinite bound stands for 0 times any number below it.
  return corners(a, b, (x, y) => (x === 0 || y === 0 ? 0 : x * y));
}

function corners(a: Bounds, b: Bounds, of: (x: number, y: number) => number): number[] {
  return [of(a.lower, b.lower), of(a.lower, b.upper), of(a.upper, b.lower), of(a.upper, b.upper)];
}

function around(values: number[]): Range {
  return bounds(Math.min(...values), Math.max(...values));
}

/** Bounds that aren't numbers (infinity less infinity, 1 to an infinite power) bound nothing. */
function bounds(lower: number, upper: number): Range {
  return {
    lower: Number.isNaN(lower) ? -Infinity : lower,
    upper: Number.isNaN(upper) ? Infinity : upper,
  };
}

function union(a: Range, b: Range): Range {
  if (a === null) return b;
  if (b === null) return a;
  return { lower: Math.min(a.lower, b.lower), upper: Math.max(a.upper, b.upper) };
}
