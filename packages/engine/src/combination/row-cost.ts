import { asymmetricVariance } from "../block/asymmetric";

/** What a value with two sides costs a level at a distance, and how that changes with the level. */
export interface RowCost {
  cost: number;
  slope: number;
}

/** Pieces between the two sides that are looked at for a minimum. */
const PIECES = 8;

/**
 * The least of w^2 / V(w) + (w - d)^2 / extra over w, what was there to be read: with the scatter
 * that the level doesn't have. Without scatter w is d, and it is d^2 / V(d).
 *
 * @param d level - value
 */
export function rowCost(d: number, plus: number, minus: number, extra: number): RowCost {
  const own = (w: number) => (w * w) / asymmetricVariance(w, plus, minus);
  if (extra === 0) return { cost: own(d), slope: ownSlope(d, plus, minus) };
  const cost = (w: number) => own(w) + ((w - d) * (w - d)) / extra;
  let best = plus;
  const take = (w: number) => {
    if (cost(w) < cost(best)) best = w;
  };
  take(-minus);
  // Outside of the two sides V is constant.
  const above = (d * plus * plus) / (plus * plus + extra);
  if (above > plus) take(above);
  const below = (d * minus * minus) / (minus * minus + extra);
  if (below < -minus) take(below);
  const slope = (w: number) => ownSlope(w, plus, minus) + (2 * (w - d)) / extra;
  for (let k = 0; k < PIECES; k += 1) {
    const from = -minus + (k * (plus + minus)) / PIECES;
    const to = from + (plus + minus) / PIECES;
    if (slope(from) <= 0 && slope(to) >= 0) take(rootOf(slope, from, to));
  }
  return { cost: cost(best), slope: (-2 * (best - d)) / extra };
}

/** d/dw of w^2 / V(w). */
function ownSlope(w: number, plus: number, minus: number): number {
  const v = asymmetricVariance(w, plus, minus);
  const moving = w > -minus && w < plus ? plus - minus : 0;
  return (2 * w) / v - (moving * w * w) / (v * v);
}

/** Where a slope turns from below 0 to above. */
export function rootOf(slope: (x: number) => number, lower: number, upper: number): number {
  let [a, b] = [lower, upper];
  for (let step = 0; step < 200; step += 1) {
    const middle = (a + b) / 2;
    if (middle <= a || middle >= b) break;
    if (slope(middle) < 0) a = middle;
    else b = middle;
  }
  return (a + b) / 2;
}
