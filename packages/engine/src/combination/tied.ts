import { minimiseLeastSquares } from "@weighhouse/numerics/levenberg-marquardt";
import { choleskyFactor, whiten } from "@weighhouse/numerics/symmetric-cholesky";
import { wrapped } from "../scoring-space";
import { asymmetricRows } from "./asymmetric-rows";
import { crossing, type AsymmetricRows, type MostLikely } from "./greatest-likelihood";
import type { GlsGroup } from "./least-squares";
import type { LevelRows } from "./level-rows";
import { rowCost } from "./row-cost";

/** Rows of two sides with what shared errors do to them. */
interface TiedRows extends AsymmetricRows {
  /** Row by row, one column a draw. */
  loadings: Float64Array;
  draws: number;
  groups: readonly GlsGroup[];
  /** V that the groups' covariances were taken at. */
  groupVariance: Float64Array;
}

/**
 * The value of greatest likelihood where asymmetric values share errors or are correlated,
 *
 *   -2 ln L(mu) = min over eta of |eta|^2 + r' D^-1 r,  r_i = mu + u_i eta - y_i
 *
 * D with V at each one's own mu + u_i eta, as chi-square takes it; correlations are kept where V
 * moves. Half the width at max - 1/2, as without shared errors.
 *
 * @returns null where a group's covariance isn't positive definite
 * Accuracy: 1e-7 of the width.
 */
export function mostLikelyTied(
  at: LevelRows,
  frame: { scatterVariance: number; period: number },
): MostLikely | null {
  const centre = at.rows[0]!.y;
  const rows = tiedRows(at, frame, centre);
  if (
    !rows.groups.every(({ covariance, rows: some }) => choleskyFactor(covariance, some.length).ok)
  ) {
    return null;
  }
  const { y, draws } = rows;
  const count = y.length + draws;
  const whole = (mu: number) =>
    minimiseLeastSquares({
      count,
      start: [mu, ...new Float64Array(draws)],
      residuals: (x, out) => residuals(rows, { mu: x[0]!, eta: x.subarray(1), out }),
    });
  let best = whole(weightedMean(rows));
  for (const start of [Math.min(...y), Math.max(...y)]) {
    const other = whole(start);
    if (other.chiSquare < best.chiSquare) best = other;
  }
  const value = best.x[0]!;
  let eta: ArrayLike<number> = best.x.slice(1);
  const cost = (mu: number) => {
    if (draws === 0) return costAlone(rows, mu);
    const fit = minimiseLeastSquares({
      count,
      start: eta,
      residuals: (x, out) => residuals(rows, { mu, eta: x, out }),
    });
    eta = fit.x;
    return fit.chiSquare;
  };
  const step = Math.max(...rows.plus, ...rows.minus);
  const goal = best.chiSquare + 1;
  const above = crossing(cost, { from: value, step, goal });
  const below = crossing(cost, { from: value, step: -step, goal });
  return { value: centre + value, sd: (above - below) / 2, chiSquare: best.chiSquare };
}

function tiedRows(
  at: LevelRows,
  frame: { scatterVariance: number; period: number },
  centre: number,
): TiedRows {
  const plain = asymmetricRows(at, frame);
  const names = new Map<string, number>();
  for (const { loads } of at.rows) {
    for (const { draw } of loads) if (!names.has(draw)) names.set(draw, names.size);
  }
  const draws = names.size;
  const loadings = new Float64Array(at.rows.length * draws);
  at.rows.forEach(({ loads }, i) => {
    for (const { draw, value } of loads) loadings[i * draws + names.get(draw)!]! += value;
  });
  return {
    ...plain,
    y: plain.y.map((y) => y - centre),
    loadings,
    draws,
    groups: at.groups,
    groupVariance: Float64Array.from(at.rows, ({ variance }) => variance),
  };
}

function weightedMean({ y, plus, minus, extra }: TiedRows): number {
  let [sum, weights] = [0, 0];
  for (let i = 0; i < y.length; i += 1) {
    const weight = 1 / (plus[i]! * minus[i]! + extra[i]!);
    sum += weight * y[i]!;
    weights += weight;
  }
  return sum / weights;
}

function residuals(
  rows: TiedRows,
  { mu, eta, out }: { mu: number; eta: Float64Array; out: Float64Array },
): void {
  const { y, plus, minus, extra, loadings, draws, period } = rows;
  const n = y.length;
  for (let i = 0; i < n; i += 1) {
    let level = mu;
    for (let k = 0; k < draws; k += 1) level += loadings[i * draws + k]! * eta[k]!;
    const d = wrapped(level - y[i]!, period);
    out[i] = Math.sign(d) * Math.sqrt(rowCost(d, plus[i]!, minus[i]!, extra[i]!).cost);
  }
  for (const group of rows.groups) whitenGroup(rows, group, out);
  for (let k = 0; k < draws; k += 1) out[n + k] = eta[k]!;
}

/** Residuals in their own sd have the correlations that the group has. */
function whitenGroup(
  { groupVariance }: TiedRows,
  { rows, covariance }: GlsGroup,
  out: Float64Array,
): void {
  const n = rows.length;
  const correlation = covariance.map((c, at) => {
    const [i, j] = [rows[Math.floor(at / n)]!, rows[at % n]!];
    return c / Math.sqrt(groupVariance[i]! * groupVariance[j]!);
  });
  const factored = choleskyFactor(correlation, n);
  if (!factored.ok) return;
  const some = Float64Array.from(rows, (row) => out[row]!);
  whiten(factored.factor, some);
  rows.forEach((row, k) => (out[row] = some[k]!));
}

function costAlone(rows: TiedRows, mu: number): number {
  const out = new Float64Array(rows.y.length);
  residuals(rows, { mu, eta: new Float64Array(), out });
  let sum = 0;
  for (const one of out) sum += one * one;
  return sum;
}
