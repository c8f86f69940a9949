import { gaussLegendre } from "@weighhouse/numerics/gauss-legendre";

/** A density over an interval, known by its log, with the masses of the panels it is cut into. */
export interface Density {
  kind: "density";
  /** ln of the density, normalised. */
  ln(x: number): number;
  /** ln of the integral of what it was made from. */
  lnWhole: number;
  /** Panels [edges[i], edges[i + 1]]; the density is smooth within each. */
  edges: Float64Array;
  /** Mass below each edge, and above it: each right to its own size. */
  below: Float64Array;
  above: Float64Array;
  mean: number;
  sd: number;
}

export interface DensityRange {
  /** Where it is to be looked at; infinities allowed. */
  lower: number;
  upper: number;
  /** Kinks, and places about which it may be narrow. At least one where an end is infinite. */
  breaks: readonly number[];
  /** > 0: of the narrowest that is about a break; how far to look first beyond the outermost. */
  scale: number;
}

/** Below the largest value by this much in ln nothing counts: e^-80 = 2e-35. */
const NEGLIGIBLE = 80;
/** Of the whole mass, the error allowed in a panel. */
const PANEL_ERROR = 1e-14;
const MOST_PANELS = 4000;

/**
 * Normalises exp(ln) and cuts its range into panels in which a 20-point Gauss-Legendre rule is
 * exact to 1e-14 of the whole, by halving those in which it isn't.
 *
 * @param ln smooth between the breaks; -Infinity allowed
 * @returns null where it is zero, or not finite, everywhere
 * Accuracy: masses to 1e-12 of the whole, where no peak is narrower than a tenth of its distance to
 *   the nearest break.
 */
export function densityOf(ln: (x: number) => number, range: DensityRange): Density | null {
  const places = placesOf(ln, range);
  const height = highest(ln, places);
  if (!Number.isFinite(height)) return null;
  const edges = cutPanels(
    (x) => Math.exp(ln(x) - height),
    startingEdges(ln, places, { height, scale: range.scale }),
  );
  const panels = edges.length - 1;
  const f = (x: number) => Math.exp(ln(x) - height);
  const masses = new Float64Array(panels);
  let total = 0;
  for (let i = 0; i < panels; i += 1) {
    masses[i] = gaussLegendre(f, edges[i]!, edges[i + 1]!);
    total += masses[i]!;
  }
  if (!(total > 0 && total < Infinity)) return null;
  const { mean, variance } = moments(f, edges, total);
  if (!(Number.isFinite(mean) && variance > 0 && variance < Infinity)) return null;
  const below = new Float64Array(panels + 1);
  const above = new Float64Array(panels + 1);
  for (let i = 0; i < panels; i += 1) below[i + 1] = below[i]! + masses[i]! / total;
  for (let i = panels - 1; i >= 0; i -= 1) above[i] = above[i + 1]! + masses[i]! / total;
  const norm = height + Math.log(total);
  const sd = Math.sqrt(variance);
  return { kind: "density", ln: (x) => ln(x) - norm, lnWhole: norm, edges, below, above, mean, sd };
}

/** Mass between two bounds, without the cancellation of two distribution functions. */
export function massBetween(density: Density, lower: number, upper: number): number {
  const { edges, ln } = density;
  const last = edges.length - 1;
  const from = Math.max(lower, edges[0]!);
  const to = Math.min(upper, edges[last]!);
  if (!(from < to)) return 0;
  const f = (x: number) => Math.exp(ln(x));
  let mass = 0;
  for (let i = panelOf(edges, from); i < last && edges[i]! < to; i += 1) {
    const [a, b] = [Math.max(from, edges[i]!), Math.min(to, edges[i + 1]!)];
    if (a === edges[i] && b === edges[i + 1]) mass += density.below[i + 1]! - density.below[i]!;
    else mass += gaussLegendre(f, a, b);
  }
  return Math.min(mass, 1);
}

/** P(X <= x), or P(X > x) with `upper`, each right to its own size. */
export function densityTail(density: Density, x: number, side: "lower" | "upper"): number {
  const { edges, below, above, ln } = density;
  const last = edges.length - 1;
  if (x <= edges[0]!) return side === "lower" ? 0 : 1;
  if (x >= edges[last]!) return side === "lower" ? 1 : 0;
  const i = panelOf(edges, x);
  const f = (t: number) => Math.exp(ln(t));
  return side === "lower"
    ? below[i]! + gaussLegendre(f, edges[i]!, x)
    : above[i + 1]! + gaussLegendre(f, x, edges[i + 1]!);
}

/** The x that P(X <= x) = p holds for; p in (0, 1). */
export function densityQuantile(density: Density, p: number): number {
  const { edges, below } = density;
  let i = 0;
  while (i < edges.length - 2 && below[i + 1]! < p) i += 1;
  let [a, b] = [edges[i]!, edges[i + 1]!];
  for (let step = 0; step < 100; step += 1) {
    const middle = (a + b) / 2;
    if (middle === a || middle === b) break;
    if (densityTail(density, middle, "lower") < p) a = middle;
    else b = middle;
  }
  return (a + b) / 2;
}

/** The mean of a function of x. */
export function averageOver({ ln, edges }: Density, f: (x: number) => number): number {
  let sum = 0;
  for (let i = 0; i + 1 < edges.length; i += 1) {
    sum += gaussLegendre((x) => f(x) * Math.exp(ln(x)), edges[i]!, edges[i + 1]!);
  }
  return sum;
}

function panelOf(edges: Float64Array, x: number): number {
  let [low, high] = [0, edges.length - 1];
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (edges[middle]! <= x) low = middle;
    else high = middle;
  }
  return low;
}

/** Bounds and breaks in increasing order, unbounded ends replaced by where nothing counts any more. */
function placesOf(ln: (x: number) => number, range: DensityRange): number[] {
  const { lower, upper, scale } = range;
  const inside = range.breaks.filter((x) => x > lower && x < upper);
  const sorted = [...new Set(inside)].sort((a, b) => a - b);
  const ends: number[] = [];
  const largest = highest(ln, sorted);
  if (lower === -Infinity) ends.push(...outwards(ln, { from: sorted[0]!, step: -scale, largest }));
  else ends.push(lower);
  if (upper === Infinity)
    ends.push(...outwards(ln, { from: sorted.at(-1)!, step: scale, largest }));
  else ends.push(upper);
  return [...new Set([...sorted, ...ends])].sort((a, b) => a - b);
}

/** Steps that double, until the log has fallen far enough below the largest. */
function outwards(
  ln: (x: number) => number,
  { from, step, largest }: { from: number; step: number; largest: number },
): number[] {
  const steps: number[] = [];
  let top = largest;
  for (let reach = step; Number.isFinite(from + reach); reach *= 2) {
    steps.push(from + reach);
    const value = ln(from + reach);
    if (value > top) top = value;
    else if (!(value > top - NEGLIGIBLE)) break;
  }
  return steps;
}

/** Each interval between two places looked at in this many steps for a peak. */
const LOOKS = 8;

function highest(ln: (x: number) => number, places: readonly number[]): number {
  let best = -Infinity;
  for (const place of places) best = Math.max(best, at(ln, place));
  for (let i = 0; i + 1 < places.length; i += 1) {
    const step = (places[i + 1]! - places[i]!) / LOOKS;
    for (let k = 1; k < LOOKS; k += 1) best = Math.max(best, at(ln, places[i]! + k * step));
  }
  return best;
}

function at(ln: (x: number) => number, x: number): number {
  const value = ln(x);
  return Number.isNaN(value) ? -Infinity : value;
}

/**
 * The places and what is between them, without the ends that count for nothing: evenly, and in steps
 * that double away from each place, so that a peak about one isn't passed over in a long stretch.
 */
function startingEdges(
  ln: (x: number) => number,
  places: readonly number[],
  { height, scale }: { height: number; scale: number },
): number[] {
  const all = new Set(places);
  for (let i = 0; i + 1 < places.length; i += 1) {
    const [a, b] = [places[i]!, places[i + 1]!];
    for (let k = 1; k < LOOKS; k += 1) all.add(a + (k * (b - a)) / LOOKS);
    for (let reach = scale; reach < (b - a) / LOOKS; reach *= 2) all.add(a + reach).add(b - reach);
  }
  const edges = [...all].sort((a, b) => a - b);
  const counts = (x: number | undefined) => x !== undefined && at(ln, x) > height - NEGLIGIBLE;
  let [first, last] = [0, edges.length - 1];
  while (first + 1 < last && !counts(edges[first]) && !counts(edges[first + 1])) first += 1;
  while (last - 1 > first && !counts(edges[last]) && !counts(edges[last - 1])) last -= 1;
  return edges.slice(first, last + 1);
}

interface Panel {
  lower: number;
  upper: number;
  mass: number;
}

/** Halves panels, the left one first, until both halves together are what the whole was. */
function cutPanels(f: (x: number) => number, edges: readonly number[]): Float64Array {
  const waiting: Panel[] = [];
  let whole = 0;
  for (let i = edges.length - 2; i >= 0; i -= 1) {
    const [lower, upper] = [edges[i]!, edges[i + 1]!];
    const mass = gaussLegendre(f, lower, upper);
    whole += mass;
    waiting.push({ lower, upper, mass });
  }
  const cut: number[] = [];
  while (waiting.length > 0) {
    const panel = waiting.pop()!;
    const middle = (panel.lower + panel.upper) / 2;
    const left = gaussLegendre(f, panel.lower, middle);
    const right = gaussLegendre(f, middle, panel.upper);
    whole += left + right - panel.mass;
    const close =
      Math.abs(left + right - panel.mass) <= PANEL_ERROR * Math.max(whole, left + right);
    const split = middle > panel.lower && middle < panel.upper;
    if (close || !split || cut.length + waiting.length > MOST_PANELS) {
      cut.push(panel.lower);
      continue;
    }
    waiting.push({ lower: middle, upper: panel.upper, mass: right });
    waiting.push({ lower: panel.lower, upper: middle, mass: left });
  }
  cut.push(edges.at(-1)!);
  return Float64Array.from(cut);
}

function moments(f: (x: number) => number, edges: Float64Array, total: number) {
  const centre = edges[edges.length >> 1]!;
  let first = 0;
  for (let i = 0; i + 1 < edges.length; i += 1) {
    first += gaussLegendre((x) => (x - centre) * f(x), edges[i]!, edges[i + 1]!);
  }
  const mean = centre + first / total;
  let second = 0;
  for (let i = 0; i + 1 < edges.length; i += 1) {
    second += gaussLegendre((x) => (x - mean) ** 2 * f(x), edges[i]!, edges[i + 1]!);
  }
  return { mean, variance: second / total };
}
