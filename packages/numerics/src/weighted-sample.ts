import type { CubeIntegral } from "./cube-integral";

/** sum of w_i x_i, the weights given as logs that add up to 1. */
export function weightedMean(values: ArrayLike<number>, lnWeights: Float64Array): number {
  // About the first value, so that values far from 0 and close together keep their digits.
  const origin = values[0] ?? Number.NaN;
  let sum = 0;
  for (let i = 0; i < lnWeights.length; i += 1) {
    sum += Math.exp(lnWeights[i]!) * (values[i]! - origin);
  }
  return origin + sum;
}

/** Square root of sum of w_i (x_i - mean)^2; no correction for the number of values. */
export function weightedSd(values: ArrayLike<number>, lnWeights: Float64Array): number {
  const mean = weightedMean(values, lnWeights);
  let sum = 0;
  for (let i = 0; i < lnWeights.length; i += 1) {
    sum += Math.exp(lnWeights[i]!) * (values[i]! - mean) ** 2;
  }
  return Math.sqrt(sum);
}

/**
 * Quantile of weighted values: the distribution function is taken to pass through the middle of
 * each value's step, and to be straight in between.
 *
 * @param values n numbers in any order, n >= 1
 * @param lnWeights logs of their weights, which add up to 1
 * @param p 0 to 1; beyond the first and the last value's middle, those values
 * Accuracy: that of the sample; of n values spread evenly about 1 / n^2.
 */
export function weightedQuantile(
  values: ArrayLike<number>,
  lnWeights: Float64Array,
  p: number,
): number {
  const order = Uint32Array.from(lnWeights, (_, i) => i).sort((a, b) => values[a]! - values[b]!);
  let below = 0;
  let lastMiddle = 0;
  let last = values[order[0]!]!;
  for (const i of order) {
    const weight = Math.exp(lnWeights[i]!);
    const middle = below + weight / 2;
    const value = values[i]!;
    if (middle >= p) {
      const share = middle > lastMiddle ? (p - lastMiddle) / (middle - lastMiddle) : 1;
      return last + Math.max(0, share) * (value - last);
    }
    below += weight;
    [lastMiddle, last] = [middle, value];
  }
  return last;
}

/**
 * Quantile of one coordinate of the posterior over the cube. Up to three dimensions the integral's
 * own distribution function is inverted; from four on the weighted points are all there is.
 *
 * @param integral with ln > -Infinity
 * @param p in (0, 1)
 * @returns u in [0, 1]. Accuracy: one dimension 1e-6 sd, two and three 1e-3 sd, more: the run's
 *   own noise, about sd / sqrt(number of independent points)
 */
export function cubeQuantile(integral: CubeIntegral, axis: number, p: number): number {
  const { cdf, nodes } = integral;
  if (cdf === undefined) {
    const dimension = nodes.points.length / nodes.lnWeights.length;
    const values = nodes.lnWeights.map((_, i) => nodes.points[i * dimension + axis]!);
    return weightedQuantile(values, nodes.lnWeights, p);
  }
  let low = 0;
  let high = 1;
  let atLow = 0;
  let atHigh = 1;
  // Illinois steps between halvings: the function is monotone but may be a cliff.
  for (let step = 0; step < 120 && high - low > 2e-16 * high; step += 1) {
    const middle = (low + high) / 2;
    const straight = low + ((p - atLow) / (atHigh - atLow)) * (high - low);
    const x = step % 2 === 0 && straight > low && straight < high ? straight : middle;
    if (x <= low || x >= high) break;
    const at = cdf(axis, x);
    if (Math.abs(at - p) < 1e-13) return x;
    if (at < p) [low, atLow] = [x, at];
    else [high, atHigh] = [x, at];
  }
  return (low + high) / 2;
}
