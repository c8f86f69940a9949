import type { Prior } from "@weighhouse/campaign/document";
import { legendreRule } from "@weighhouse/numerics/legendre-rule";
import { logNormalPdf, normalInterval } from "@weighhouse/numerics/normal";
import type { HypothesisFrame } from "./frame";
import { middleOf } from "./prior-points";

const RULE = legendreRule(20);
/** Beyond so many sd a normal has less than 1e-18. */
const REACH = 9;
/** Along the coordinate, where there is one parameter and where there are two. */
const ALONE: Fineness = { panels: 64, least: 1e-9, ratio: 4 };
const OF_TWO: Fineness = { panels: 3, least: 1e-9, ratio: 24 };

/** A prior along a coordinate of bounded range. */
interface Axis {
  slot: number;
  lower: number;
  upper: number;
  /** It ends with the prior itself, and not where that counts for nothing. */
  bounded: boolean;
  value(c: number): number;
  density(c: number): number;
  /** Of the prior between two places. */
  mass(from: number, to: number): number;
}

/**
 * Points of one or two parameters' priors with the weights of composite 20-point Gauss-Legendre
 * rules: what is smooth over the priors is averaged to 1e-9, or with two parameters to 1e-7. Panels
 * end where the expression's values do.
 *
 * The slots are one array, filled anew for each point.
 *
 * @param scored the expression in scoring space, not finite where it has no value
 * @param finer how many times as many panels
 */
export function* quadraturePoints(
  hypothesis: Pick<HypothesisFrame, "parameters" | "ensemble">,
  scored: (slots: Float64Array) => number,
  { free, finer }: { free: readonly number[]; finer: number },
): Generator<QuadraturePoint> {
  const slots = middleOf(hypothesis);
  const [first, second] = free.map((slot) => axisOf(slot, hypothesis.parameters[slot]!.prior));
  if (first === undefined) return;
  const has = (axis: Axis) => (c: number) => {
    slots[axis.slot] = axis.value(c);
    return Number.isFinite(scored(slots));
  };
  const fineness = second === undefined ? ALONE : OF_TWO;
  const panels = { ...fineness, panels: fineness.panels * finer };
  let fresh = true;
  for (const one of pointsBetween(panelsOf(first, has(first), panels), first)) {
    slots[first.slot] = first.value(one.c);
    if (second === undefined) {
      yield { slots, weight: one.weight, fresh };
      fresh = false;
      continue;
    }
    fresh = true;
    for (const other of pointsBetween(panelsOf(second, has(second), panels), second)) {
      slots[second.slot] = second.value(other.c);
      yield { slots, weight: one.weight * other.weight, fresh };
      fresh = false;
    }
    slots[second.slot] = second.value((second.lower + second.upper) / 2);
  }
}

export interface QuadraturePoint {
  slots: Float64Array;
  weight: number;
  /** It doesn't lie beside the point before it. */
  fresh: boolean;
}

/** Panels and how fine they get at ends of what has a value. */
interface Fineness {
  panels: number;
  /** Of the panels' width, the narrowest beside such an end, and how much narrower each next one is. */
  least: number;
  ratio: number;
}

function panelsOf(axis: Axis, has: (c: number) => boolean, fineness: Fineness): number[] {
  const edges = evenEdges(axis, fineness.panels);
  const ends = addEnds(edges, has);
  if (axis.bounded) ends.push(...[axis.lower, axis.upper].filter((end) => !has(end)));
  addGraded(edges, ends, fineness);
  return edges;
}

/** Of an expression of one parameter: looked at in so many stretches, in each of which it only rises or falls. */
const STRETCHES = 4096;

/**
 * The distribution of an expression of one parameter, from where it crosses a level.
 *
 * @param scored its value in scoring space, not finite where it has none
 * @returns null where it has none
 * Accuracy: 1e-12 in probability where the expression turns at most once in a 4096th of the prior's
 *   range, and no turning point lies at the level itself.
 */
export function imageOf(
  slot: number,
  prior: Prior,
  scored: (parameter: number) => number,
): { cdf(x: number): number; lower: number; upper: number } | null {
  const axis = axisOf(slot, prior);
  const at = (c: number) => scored(axis.value(c));
  const edges = evenEdges(axis, STRETCHES);
  addEnds(edges, (c) => Number.isFinite(at(c)));
  const stretches: { from: number; to: number; low: number; high: number }[] = [];
  let [whole, lower, upper] = [0, Infinity, -Infinity];
  for (let i = 0; i + 1 < edges.length; i += 1) {
    const [from, to] = [edges[i]!, edges[i + 1]!];
    const [low, high] = [at(from), at(to)];
    if (!Number.isFinite(low) || !Number.isFinite(high)) continue;
    stretches.push({ from, to, low, high });
    whole += axis.mass(from, to);
    lower = Math.min(lower, low, high);
    upper = Math.max(upper, low, high);
  }
  if (!(whole > 0)) return null;
  const cdf = (x: number) => {
    let sum = 0;
    for (const { from, to, low, high } of stretches) {
      if (low <= x && high <= x) sum += axis.mass(from, to);
      else if (low <= x || high <= x) {
        const crossing = crossingOf(at, { from, to, x, rising: low <= x });
        sum += low <= x ? axis.mass(from, crossing) : axis.mass(crossing, to);
      }
    }
    return sum / whole;
  };
  return { cdf, lower, upper };
}

function crossingOf(
  at: (c: number) => number,
  { from, to, x, rising }: { from: number; to: number; x: number; rising: boolean },
): number {
  let [a, b] = [from, to];
  for (let step = 0; step < 60; step += 1) {
    const middle = (a + b) / 2;
    if (middle === a || middle === b) break;
    if (at(middle) <= x === rising) a = middle;
    else b = middle;
  }
  return (a + b) / 2;
}

function evenEdges({ lower, upper }: Axis, panels: number): number[] {
  return Array.from({ length: panels + 1 }, (_, k) => lower + ((upper - lower) * k) / panels);
}

/** Adds the places at which there begins, or ceases, to be a value. */
function addEnds(edges: number[], has: (c: number) => boolean): number[] {
  const found: number[] = [];
  for (let i = 0; i + 1 < edges.length; i += 1) {
    let [a, b] = [edges[i]!, edges[i + 1]!];
    const before = has(a);
    if (has(b) === before) continue;
    for (let step = 0; step < 60; step += 1) {
      const middle = (a + b) / 2;
      if (middle === a || middle === b) break;
      if (has(middle) === before) a = middle;
      else b = middle;
    }
    found.push(a, b);
  }
  edges.push(...found);
  edges.sort((a, b) => a - b);
  return found;
}

/** Ever smaller steps towards where values end: a logarithm or a root may be steep there. */
function addGraded(
  edges: number[],
  ends: readonly number[],
  { panels, least, ratio }: Fineness,
): void {
  const [lower, upper] = [edges[0]!, edges.at(-1)!];
  const width = (upper - lower) / panels;
  for (const end of ends) {
    for (let step = width / 2; step > least * width; step /= ratio) {
      edges.push(end - step, end + step);
    }
  }
  const inside = edges.filter((edge) => edge >= lower && edge <= upper).sort((a, b) => a - b);
  edges.splice(0, edges.length, ...inside);
}

function* pointsBetween(
  edges: readonly number[],
  { density }: Axis,
): Generator<{ c: number; weight: number }> {
  for (let i = 0; i + 1 < edges.length; i += 1) {
    const half = (edges[i + 1]! - edges[i]!) / 2;
    for (let k = 0; k < RULE.nodes.length; k += 1) {
      const c = edges[i]! + half * (1 + RULE.nodes[k]!);
      yield { c, weight: half * RULE.weights[k]! * density(c) };
    }
  }
}

function axisOf(slot: number, prior: Prior): Axis {
  const onLine = (value: (z: number) => number, lower = -REACH): Axis => ({
    slot,
    lower,
    upper: REACH,
    bounded: lower > -REACH,
    value,
    density: (z) => Math.exp(logNormalPdf(z)),
    mass: normalInterval,
  });
  const even = (value: (u: number) => number): Axis => ({
    slot,
    lower: 0,
    upper: 1,
    bounded: true,
    value,
    density: () => 1,
    mass: (from, to) => to - from,
  });
  switch (prior.family) {
    case "normal":
      return onLine((z) => prior.mean + prior.sd * z);
    case "lognormal":
      return onLine((z) => prior.median * 10 ** (prior.sdLog10 * z));
    case "halfnormal":
      return onLine((z) => prior.sd * z, 0);
    case "uniform":
      return even((u) => prior.lower + (prior.upper - prior.lower) * u);
    case "loguniform":
      return even((u) => prior.lower * (prior.upper / prior.lower) ** u);
    case "fixed":
      return even(() => prior.value);
  }
}
