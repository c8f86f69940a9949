import { choleskyFactor, solveSymmetric } from "@weighhouse/numerics/symmetric-cholesky";
import type { Workspace } from "../workspace";
import type { Combination } from "./combination";
import { generalisedLeastSquares, type GlsFit, type GlsGroup } from "./least-squares";
import { levelRows, type LevelRows } from "./level-rows";

/** What a combined value's uncertainty is made of, as far as others have a part in it. */
export interface CombinedErrors {
  /** By draw of a shared error: what one standard deviation of it does to the value. */
  loadings: ReadonlyMap<string, number>;
  /** The variance that is left without them. */
  ownVariance: number;
  /** By measurement that is correlated with others: what one of its own sd does to the value. */
  correlated: ReadonlyMap<string, number>;
}

/**
 * The parts of a combined value's uncertainty, from the weights that least squares give its
 * measurements. Where the value isn't theirs alone (asymmetric ones, limits) the parts are made to
 * add up to its variance.
 */
export function combinedErrors(
  workspace: Workspace,
  measurand: number,
  { value, sd }: Combination,
): CombinedErrors {
  const at = levelRows(workspace, measurand, value);
  const alone = { loadings: new Map(), ownVariance: sd * sd, correlated: new Map() };
  if (at.rows.length === 0) return alone;
  const fit = generalisedLeastSquares(at.rows, at.groups);
  if (fit === null) return alone;
  const share = sd / fit.sd;
  const loadings = new Map<string, number>();
  for (const [draw, loading] of fit.loadings) loadings.set(draw, loading * share);
  const weights = correlatedWeights(workspace, at, fit);
  const correlated = new Map<string, number>();
  for (const [id, weight] of weights) correlated.set(id, weight * share);
  return { loadings, ownVariance: fit.ownVariance * share * share, correlated };
}

/**
 * Weights of the correlated measurements times their own sd: least squares' weights are
 * a = D^-1 (var mu - U l), l the value's loadings, and D is block-diagonal.
 */
function correlatedWeights(
  { frame }: Workspace,
  { rows, readings, groups }: LevelRows,
  fit: GlsFit,
): Map<string, number> {
  const weights = new Map<string, number>();
  if (frame.correlated.size === 0) return weights;
  const right = rows.map(({ loads }) => {
    let sum = fit.sd * fit.sd;
    for (const { draw, value } of loads) sum -= value * (fit.loadings.get(draw) ?? 0);
    return sum;
  });
  const grouped = new Map<number, number>();
  for (const group of groups) solveGroup(group, right).forEach((w, i) => grouped.set(i, w));
  readings.forEach((reading, i) => {
    if (reading === null || !frame.correlated.has(reading.id)) return;
    const { told } = reading;
    const variance = rows[i]!.variance;
    const own = told.form === "value" || told.form === "zero" ? told.variance : variance;
    weights.set(reading.id, (grouped.get(i) ?? right[i]! / variance) * Math.sqrt(own));
  });
  return weights;
}

function solveGroup({ rows, covariance }: GlsGroup, right: readonly number[]): Map<number, number> {
  const factored = choleskyFactor(covariance, rows.length);
  if (!factored.ok) return new Map();
  const solved = Float64Array.from(rows, (row) => right[row]!);
  solveSymmetric(factored.factor, solved);
  return new Map(rows.map((row, k) => [row, solved[k]!]));
}
