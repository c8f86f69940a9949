import type { Ensemble, Parameter, Prior, Scale } from "../document";
import type { Expression } from "../expression";
import { rangeOf } from "../expression-range";
import type { Range } from "../expression-range";
import { sizeOf } from "../expression-tree";
import type { PredictionPlace } from "./prediction-place";

/** Draws of parameters, and points of conditions, at which an expression is tried first. */
const DRAWS = 256;
const CONDITION_POINTS = 16;
/** Boxes that are looked into where none of those has a value, and ensemble rows among them. */
const BOXES = 4000;
const ROWS = 80;
/** What bounds cost, in values. */
const RANGE_EFFORT = 5;
/** The 1 % and 99 % points of the standard normal and half-normal (Abramowitz & Stegun 26.2). */
const NORMAL_99 = 2.3263478740408408;
const HALF_NORMAL_01 = 0.012533469508069276;
const HALF_NORMAL_99 = 2.5758293035489004;

/**
 * Whether an expression is finite (positive on log10, a rate on counts) anywhere over the 1 % to
 * 99 % range of its parameters, its ensemble's rows, and its conditions in the measurand's `where`
 * (else where they were measured).
 *
 * Tried are the middle of the priors and a Halton sequence (1960). Where none of these has a value,
 * the box is halved again and again: halves whose bounds rule a value out are dropped, the middles
 * of the others tried, up to 4,000 of them. So a value in a narrow corner is found nearly always.
 *
 * True also where a condition has no bounds to try between, and where the document's other
 * expressions have used up the effort: then nothing can be said.
 */
export function hasValueSomewhere(
  expression: Expression,
  place: PredictionPlace,
  { ranges, effort }: { ranges: readonly ConditionRange[] | null; effort: Effort },
): boolean {
  if (ranges === null) return true;
  const { hypothesis, observable } = place;
  const parameters = ((hypothesis.parameters ?? []) as Parameter[]).filter(({ key }) =>
    expression.names.has(key),
  );
  const columns = Object.entries((hypothesis.ensemble as Ensemble | null)?.columns ?? {}).filter(
    ([name]) => expression.names.has(name),
  );
  const lowest = lowestBelow(observable?.scale);
  const size = sizeOf(expression.tree);
  const search = { expression, parameters, columns, ranges, lowest, size, effort };
  return foundByDraws(search) || foundInBoxes(search) || effort.left <= 0;
}

/** Parts of expressions that may still be computed: a document of many bad ones is answered too. */
export type Effort = { left: number };

/** A condition with the least and the greatest of its values. */
export type ConditionRange = readonly [name: string, lower: number, upper: number];

type Search = {
  expression: Expression;
  parameters: readonly Parameter[];
  columns: readonly (readonly [name: string, column: readonly number[]])[];
  ranges: readonly ConditionRange[];
  lowest: number;
  size: number;
  effort: Effort;
};

function foundByDraws(search: Search): boolean {
  const { parameters, columns, ranges } = search;
  const rows = columns[0]?.[1].length ?? 1;
  const points = ranges.length === 0 ? 1 : CONDITION_POINTS;
  const draws = parameters.length === 0 ? rows : Math.max(DRAWS, rows);
  for (let draw = 0; draw < draws; draw++) {
    const scope: Record<string, number> = {};
    parameters.forEach(({ key, prior }, dimension) => {
      scope[key] = quantile(prior, draw === 0 ? 0.5 : halton(draw, dimension));
    });
    for (const [name, column] of columns) scope[name] = column[draw % rows]!;
    for (let point = 0; point < points; point++) {
      ranges.forEach(([name, lower, upper], dimension) => {
        scope[name] = lower + (upper - lower) * spread(point, dimension);
      });
      if (isValue(search, scope)) return true;
      if (search.effort.left <= 0) return false;
    }
  }
  return false;
}

function isValue(
  { expression, lowest, size, effort }: Search,
  scope: Record<string, number>,
): boolean {
  effort.left -= size;
  const value = expression.evaluate(scope);
  return Number.isFinite(value) && value > lowest;
}

function foundInBoxes(search: Search): boolean {
  const { columns } = search;
  const rows = Math.min(columns[0]?.[1].length ?? 1, ROWS);
  for (let row = 0; row < rows; row++) {
    const fixed = new Map(columns.map(([name, column]) => [name, column[row]!]));
    const most = Math.ceil(BOXES / rows / 2);
    // The newest first gets deep into one corner; the oldest first forgets no corner.
    if (foundInBox(search, fixed, { most, first: "newest" })) return true;
    if (foundInBox(search, fixed, { most, first: "oldest" })) return true;
  }
  return false;
}

/** Each box halved along one dimension after the other. */
function foundInBox(
  search: Search,
  row: ReadonlyMap<string, number>,
  { most, first }: { most: number; first: "newest" | "oldest" },
): boolean {
  const axes: Axis[] = [
    ...search.parameters.map(({ key, prior }): Axis => [key, (u) => quantile(prior, u)]),
    ...search.ranges.map(([name, a, b]): Axis => [name, (u) => a + (b - a) * u]),
  ];
  if (axes.length === 0) return false;
  const boxes: Box[] = [{ depth: 0, from: axes.map(() => 0), to: axes.map(() => 1) }];
  let oldest = 0;
  for (let looked = 0; looked < most && oldest < boxes.length; looked++) {
    if (search.effort.left <= 0) return false;
    const box = first === "oldest" ? boxes[oldest++]! : boxes.pop()!;
    const found = lookInto(search, { row, axes, box });
    if (found === "a value") return true;
    if (found === "none") continue;
    const { depth, from, to } = box;
    const axis = depth % axes.length;
    const middle = (from[axis]! + to[axis]!) / 2;
    boxes.push({ depth: depth + 1, from, to: to.with(axis, middle) });
    boxes.push({ depth: depth + 1, from: from.with(axis, middle), to });
  }
  return false;
}

/** A dimension of the box: from 0 to 1 of a prior's range, or of a condition's. */
type Axis = readonly [name: string, at: (u: number) => number];
type Box = { depth: number; from: number[]; to: number[] };

function lookInto(
  search: Search,
  { row, axes, box }: { row: ReadonlyMap<string, number>; axes: readonly Axis[]; box: Box },
): "a value" | "none" | "perhaps" {
  const bounds = new Map<string, Range>([...row].map(([name, value]) => [name, exactly(value)]));
  const scope: Record<string, number> = Object.fromEntries(row);
  axes.forEach(([name, at], axis) => {
    const [from, to] = [box.from[axis]!, box.to[axis]!];
    bounds.set(name, { lower: at(from), upper: at(to) });
    scope[name] = at((from + to) / 2);
  });
  search.effort.left -= RANGE_EFFORT * search.size;
  if (isRuledOut(rangeOf(search.expression.tree, bounds), search.lowest)) return "none";
  return isValue(search, scope) ? "a value" : "perhaps";
}

function exactly(value: number): Range {
  return { lower: value, upper: value };
}

function isRuledOut(range: Range, lowest: number): boolean {
  return (
    range === null ||
    !(range.upper > lowest) ||
    range.lower === Infinity ||
    range.upper === -Infinity
  );
}

/** What a value has to lie above: a logarithm needs more than 0, a rate at least 0. */
function lowestBelow(scale: Scale | undefined): number {
  if (scale === "log10") return 0;
  return scale === "count" ? -Number.MIN_VALUE : -Infinity;
}

/** Both ends first, then points between. */
function spread(point: number, dimension: number): number {
  return point < 2 ? point : halton(point, dimension);
}

/** A point between the 1 % and the 99 % of a prior; exact at both ends, monotonic between. */
function quantile(prior: Prior, u: number): number {
  switch (prior.family) {
    case "normal":
      return prior.mean + prior.sd * NORMAL_99 * (2 * u - 1);
    case "lognormal":
      return prior.median * 10 ** (prior.sdLog10 * NORMAL_99 * (2 * u - 1));
    case "halfnormal":
      return prior.sd * (HALF_NORMAL_01 + (HALF_NORMAL_99 - HALF_NORMAL_01) * u);
    case "uniform":
      return prior.lower + (prior.upper - prior.lower) * (0.01 + 0.98 * u);
    case "loguniform":
      return prior.lower * (prior.upper / prior.lower) ** (0.01 + 0.98 * u);
    case "fixed":
      return prior.value;
  }
}

const PRIMES = [2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37, 41, 43, 47, 53];

/** The radical inverse of an index in a prime base (Halton 1960). */
function halton(index: number, dimension: number): number {
  const base = PRIMES[dimension % PRIMES.length]!;
  let value = 0;
  let weight = 1 / base;
  for (let rest = index; rest > 0; rest = Math.floor(rest / base)) {
    value += (rest % base) * weight;
    weight /= base;
  }
  return value;
}
