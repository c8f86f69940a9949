import { generalisedLeastSquares, type GlsFit, type GlsGroup, type GlsRow } from "./least-squares";
import { wrapped } from "../scoring-space";

/** Where rows hang together every stretch is a fit of its own: of more rows than this, some are tried. */
const MOST_STRETCHES = 256;

/**
 * The level f that makes the weighted squares of the wrapped differences y - f least,
 *
 *   chi2(f) = r' M r,  r_i = y_i - f in (-period / 2, period / 2],  M = (D + U U')^-1
 *
 * Between two places where a difference wraps chi2 is a parabola; the least of all is taken.
 *
 * @returns the fit with its value in [0, period); null where a group's covariance isn't positive
 *   definite
 * Accuracy: the global minimum for independent rows, or at most 256 dependent ones; for more of
 *   those the least of 256 stretches spread over the circle.
 */
export function cyclicLeastSquares(
  rows: readonly GlsRow[],
  groups: readonly GlsGroup[],
  period: number,
): GlsFit | null {
  // Counted from the first, which the others are near: from 0 narrow ones lose their digits.
  const centre = rows[0]!.y;
  const near = rows.map((row) => ({ ...row, y: row.y - centre }));
  const tied = groups.length > 0 || rows.some(({ loads }) => loads.length > 0);
  const best = tied ? bestOfStretches(near, groups, period) : independent(near, period);
  return best === null ? null : { ...best, value: onCircle(centre + best.value, period) };
}

/** In [0, period). */
export function onCircle(value: number, period: number): number {
  const turned = value - period * Math.floor(value / period);
  return turned >= period ? 0 : turned;
}

/** Rows in the order in which their differences wrap as f grows from 0 to the period. */
function inOrder(rows: readonly GlsRow[], period: number) {
  // At f = 0 differences are in (-period / 2, period / 2]: y_i wraps when f reaches this.
  const order = rows.map(({ y }, i) => {
    const r = wrapped(y, period);
    return { i, r, at: r + period / 2 };
  });
  return order.sort((a, b) => a.at - b.at || a.i - b.i);
}

function independent(rows: readonly GlsRow[], period: number): GlsFit {
  const order = inOrder(rows, period);
  let weights = 0;
  for (const { variance } of rows) weights += 1 / variance;
  const squaresAt = (mean: number) => {
    let squares = 0;
    for (const { y, variance } of rows) squares += wrapped(y - mean, period) ** 2 / variance;
    return squares;
  };
  let sum = 0;
  let squares = 0;
  for (const { i, r } of order) {
    sum += r / rows[i]!.variance;
    squares += (r * r) / rows[i]!.variance;
  }
  let best = { value: sum / weights, least: Infinity };
  for (let step = 0; step <= order.length; step += 1) {
    const least = squares - (sum * sum) / weights;
    if (least < best.least) best = { value: sum / weights, least };
    if (step === order.length) break;
    // From here on this difference is counted from the other side.
    const { i, r } = order[step]!;
    sum += period / rows[i]!.variance;
    squares += (2 * r * period + period * period) / rows[i]!.variance;
  }
  const value = settle(rows, best.value, { period, weights });
  const ownVariance = 1 / weights;
  const sd = Math.sqrt(ownVariance);
  return { value, sd, chiSquare: squaresAt(value), loadings: new Map(), ownVariance };
}

/** The mean of the differences at a level, added to it: rid of what the running sums have lost. */
function settle(
  rows: readonly GlsRow[],
  start: number,
  { period, weights }: { period: number; weights: number },
): number {
  let shift = 0;
  for (const { y, variance } of rows) shift += wrapped(y - start, period) / variance;
  return start + shift / weights;
}

function bestOfStretches(
  rows: readonly GlsRow[],
  groups: readonly GlsGroup[],
  period: number,
): GlsFit | null {
  const order = inOrder(rows, period);
  const every = Math.max(1, Math.ceil((order.length + 1) / MOST_STRETCHES));
  let best: GlsFit | null = null;
  for (let turned = 0; turned <= order.length; turned += every) {
    const [from, to] = [order[turned - 1]?.at ?? 0, order[turned]?.at ?? period];
    const moved = rows.slice();
    order.forEach(({ i, r }, place) => {
      moved[i] = { ...rows[i]!, y: place < turned ? r + period : r };
    });
    const fit = generalisedLeastSquares(moved, groups);
    if (fit === null) return null;
    const value = Math.min(Math.max(fit.value, from), to);
    const chiSquare = fit.chiSquare + ((value - fit.value) / fit.sd) ** 2;
    if (best === null || chiSquare < best.chiSquare) best = { ...fit, value, chiSquare };
  }
  return best;
}
