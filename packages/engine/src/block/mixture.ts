import { findRoot } from "@weighhouse/numerics/find-root";
import { normalCdf } from "@weighhouse/numerics/normal";
import type { BlockEvidence, Mixture, Query } from "./problem";

/** Beyond this many standard deviations a normal holds less than 1e-18. */
const REACH = 9;

/**
 * The distribution of constant + sum of loadings_k z_k under a posterior: one normal for each of
 * its pieces. Empty where the likelihood is zero.
 */
export function mixtureOf({ posterior, unknowns }: BlockEvidence, query: Query): Mixture {
  const pieces = posterior();
  const mixture: Mixture = {
    weights: Float64Array.from(pieces, ({ weight }) => weight),
    means: new Float64Array(pieces.length),
    sds: new Float64Array(pieces.length),
  };
  const loadings = new Float64Array(unknowns.linear);
  pieces.forEach(({ outer, scenario, linear }, n) => {
    loadings.fill(0);
    let mean = query(outer, scenario, loadings);
    if (loadings.some((value) => value !== 0)) {
      const known = linear();
      for (let k = 0; k < loadings.length; k += 1) mean += loadings[k]! * known.mean[k]!;
      mixture.sds[n] = known.spread(loadings);
    }
    mixture.means[n] = mean;
  });
  return mixture;
}

export function mixtureMoments({ weights, means, sds }: Mixture): { mean: number; sd: number } {
  // About the first mean, so that nothing is lost on numbers far from 0.
  const origin = means[0] ?? NaN;
  let shift = 0;
  weights.forEach((weight, n) => (shift += weight * (means[n]! - origin)));
  let variance = 0;
  weights.forEach((weight, n) => {
    variance += weight * ((means[n]! - origin - shift) ** 2 + sds[n]! ** 2);
  });
  return { mean: origin + shift, sd: Math.sqrt(variance) };
}

/**
 * Quantiles of a mixture. Where all its normals have no width it is points of a smooth density, and
 * the distribution function is drawn straight between them, each point's weight half below it.
 *
 * @param ps probabilities in (0, 1)
 */
export function mixtureQuantiles(mixture: Mixture, ps: readonly number[]): number[] {
  const { weights, means, sds } = mixture;
  if (sds.every((sd) => sd === 0)) return pointQuantiles(mixture, ps);
  let lower = Infinity;
  let upper = -Infinity;
  means.forEach((mean, n) => {
    lower = Math.min(lower, mean - REACH * sds[n]!);
    upper = Math.max(upper, mean + REACH * sds[n]!);
  });
  return ps.map((p) => {
    const above = (x: number) => {
      let sum = -p;
      for (let n = 0; n < weights.length; n += 1) {
        const z = x - means[n]!;
        sum += weights[n]! * (sds[n]! > 0 ? normalCdf(z / sds[n]!) : z >= 0 ? 1 : 0);
      }
      return sum;
    };
    // Far from 0 all of it may be one number.
    if (!(above(lower) < 0)) return lower;
    if (!(above(upper) > 0)) return upper;
    return findRoot(above, lower, upper, 1e-12 * (upper - lower));
  });
}

function pointQuantiles({ weights, means }: Mixture, ps: readonly number[]): number[] {
  const order = Array.from(means.keys()).sort((a, b) => means[a]! - means[b]!);
  const values: number[] = [];
  const below: number[] = [];
  let sum = 0;
  for (const n of order) {
    values.push(means[n]!);
    below.push(sum + weights[n]! / 2);
    sum += weights[n]!;
  }
  return ps.map((p) => {
    const next = below.findIndex((share) => share >= p);
    if (next < 0) return values.at(-1)!;
    if (next === 0) return values[0]!;
    const share = (p - below[next - 1]!) / (below[next]! - below[next - 1]!);
    return values[next - 1]! + share * (values[next]! - values[next - 1]!);
  });
}
