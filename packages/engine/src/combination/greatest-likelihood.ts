import { wrapped } from "../scoring-space";
import { rootOf, rowCost } from "./row-cost";

/** Values in scoring space; symmetric ones have plus = minus. */
export interface AsymmetricRows {
  y: Float64Array;
  plus: Float64Array;
  minus: Float64Array;
  /** Of the scatter that each one's target had beside the level. */
  extra: Float64Array;
  /** Differences are wrapped into (-period / 2, period / 2]; 0: not at all. */
  period: number;
}

export interface MostLikely {
  value: number;
  sd: number;
  /** -2 ln L at the maximum, without its constants. */
  chiSquare: number;
}

/**
 * The value of greatest likelihood, with half the width at ln L = max - 1/2, of
 *
 *   -2 ln L(mu) = sum over i of min over w of (w - y)^2 / V(w) + (w - mu)^2 / extra
 *   V(w) = plus minus + (plus - minus)(w - y), clamped to [min(plus, minus)^2, max(plus, minus)^2]
 *
 * w is what was there to be read: mu with the target's scatter, mu itself without any.
 *
 * The sum may have more than one minimum: each stretch between values and ends of the clamped
 * ranges is looked at, and the least is taken.
 *
 * Accuracy: 1e-12 of the width.
 * Source: Barlow, arXiv:physics/0406120, section 3.6, with V kept from vanishing.
 */
export function mostLikely(given: AsymmetricRows): MostLikely {
  // Counted from the first, which the others are near: far from 0 differences lose their digits.
  const centre = given.y[0]!;
  const rows = { ...given, y: given.y.map((y) => y - centre) };
  const cost = (mu: number) => costAt(rows, mu);
  const { value, chiSquare, step } = leastOf({
    cost,
    slope: (mu) => slopeAt(rows, mu),
    places: placesOf(rows),
  });
  const goal = chiSquare + 1;
  const above = crossing(cost, { from: value, step, goal });
  const below = crossing(cost, { from: value, step: -step, goal });
  return { value: centre + value, sd: (above - below) / 2, chiSquare };
}

function costAt({ y, plus, minus, extra, period }: AsymmetricRows, mu: number): number {
  let sum = 0;
  for (let i = 0; i < y.length; i += 1) {
    sum += rowCost(wrapped(mu - y[i]!, period), plus[i]!, minus[i]!, extra[i]!).cost;
  }
  return sum;
}

function slopeAt({ y, plus, minus, extra, period }: AsymmetricRows, mu: number): number {
  let sum = 0;
  for (let i = 0; i < y.length; i += 1) {
    sum += rowCost(wrapped(mu - y[i]!, period), plus[i]!, minus[i]!, extra[i]!).slope;
  }
  return sum;
}

/** Values with the ends of their variances' ranges, and on a circle where differences wrap. */
function placesOf({ y, plus, minus, period }: AsymmetricRows): Float64Array {
  const places: number[] = [];
  for (let i = 0; i < y.length; i += 1) {
    places.push(y[i]!);
    if (plus[i] !== minus[i]) places.push(y[i]! - minus[i]!, y[i]! + plus[i]!);
  }
  if (period > 0) {
    const turns = y.length;
    for (let i = 0; i < turns; i += 1) places.push(y[i]! + period / 2, y[i]! - period / 2);
  }
  return Float64Array.from(new Set(places)).sort();
}

/** Long lists are thinned to this many stretches: V hardly moves between their neighbours. */
const MOST_STRETCHES = 2000;

function leastOf({
  cost,
  slope,
  places,
}: {
  cost: (mu: number) => number;
  slope: (mu: number) => number;
  places: Float64Array;
}): { value: number; chiSquare: number; step: number } {
  const every = Math.max(1, Math.ceil(places.length / MOST_STRETCHES));
  const kept = places.filter((_, i) => i % every === 0 || i === places.length - 1);
  let value = kept[0]!;
  let chiSquare = cost(value);
  const take = (mu: number) => {
    const found = cost(mu);
    if (found < chiSquare) [value, chiSquare] = [mu, found];
  };
  for (let i = 0; i + 1 < kept.length; i += 1) {
    take(kept[i + 1]!);
    const [a, b] = [kept[i]!, kept[i + 1]!];
    if (slope(a + 1e-9 * (b - a)) < 0 && slope(b - 1e-9 * (b - a)) > 0) take(rootOf(slope, a, b));
  }
  return { value, chiSquare, step: Math.max((kept.at(-1)! - kept[0]!) / 64, Number.MIN_VALUE) };
}

/** The nearest place, that way, at which the cost reaches the goal. */
export function crossing(
  cost: (mu: number) => number,
  { from, step, goal }: { from: number; step: number; goal: number },
): number {
  let reach = step;
  while (cost(from + reach) >= goal && Math.abs(reach) > 1e-12 * Math.abs(step)) reach /= 2;
  let inside = from;
  let outside = from + reach;
  for (let tries = 0; tries < 100000 && cost(outside) < goal; tries += 1) {
    inside = outside;
    outside += reach;
    if (tries % 16 === 15) reach *= 2;
  }
  for (let tries = 0; tries < 200; tries += 1) {
    const middle = (inside + outside) / 2;
    if (middle === inside || middle === outside) break;
    if (cost(middle) < goal) inside = middle;
    else outside = middle;
  }
  return (inside + outside) / 2;
}
