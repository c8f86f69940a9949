import { gaussKronrod } from "@weighhouse/numerics/gauss-kronrod";
import { normalCdf } from "@weighhouse/numerics/normal";
import { logDensity, type Predictive } from "./predictive";

/** A hypothesis in the mixture: today's posterior probability, and its predictive. */
export interface Weighted {
  posterior: number;
  predictive: Predictive;
}

/** Beyond this many sd of a component nothing counts: 1e-33 of its mass. */
const REACH = 12;
const MOST_PIECES = 24;

/**
 * Mutual information in bits between "which hypothesis" and a reading,
 *
 *   I = sum_k P_k integral p_k(y) log2(p_k(y) / sum_j P_j p_j(y)) dy
 *
 * @param sd the reading's own noise, above 0
 * @returns 0 to log2 of the number of hypotheses
 * Accuracy: 1e-9 bits for normal predictives, 1e-3 for tabulated ones.
 * Source: Lindley, Ann. Math. Stat. 27 (1956) 986. Reference values: test/reference, eig.*.
 */
export function informationGain(mixture: readonly Weighted[], sd: number): number {
  if (mixture.length < 2) return 0;
  const integrand = (y: number) => {
    const logs = mixture.map(({ predictive }) => logDensity(predictive, y, sd));
    const most = Math.max(...logs);
    if (most < -700) return 0;
    const shares = logs.map((log) => Math.exp(log - most));
    let mean = 0;
    mixture.forEach(({ posterior }, k) => (mean += posterior * shares[k]!));
    const logMean = Math.log(mean);
    let sum = 0;
    mixture.forEach(({ posterior }, k) => {
      const share = posterior * shares[k]!;
      if (share > 0) sum += share * (logs[k]! - most - logMean);
    });
    return (sum * Math.exp(most)) / Math.LN2;
  };
  const edges = edgesOf(mixture, sd);
  const relative = isTabulated(mixture) ? 1e-6 : 1e-10;
  let bits = 0;
  for (let i = 1; i < edges.length; i += 1) {
    bits += gaussKronrod(integrand, edges[i - 1]!, edges[i]!, { relative, maximum: 30 }).value;
  }
  // Rounding can't make a reading tell less than nothing.
  return Math.max(bits, 0);
}

/** Whether any predictive is known to three digits only. */
function isTabulated(mixture: readonly Weighted[]): boolean {
  return mixture.some(({ predictive }) => predictive.floor > 0);
}

/** Points between which the mixture is smooth: about every component's middle and ends. */
function edgesOf(mixture: readonly Weighted[], sd: number): number[] {
  const points: number[] = [];
  for (const { predictive } of mixture) {
    const { components, floor } = predictive;
    const every = Math.ceil(components.length / MOST_PIECES);
    components.forEach(({ mean, variance }, i) => {
      const spread = Math.sqrt(variance + Math.max(sd * sd - floor, 0));
      const last = i === components.length - 1;
      if (i === 0 || last) for (const z of [-REACH, -4, 4, REACH]) points.push(mean + z * spread);
      if (i % every === 0 || last) points.push(mean);
    });
  }
  points.sort((a, b) => a - b);
  return points.filter((point, i) => i === 0 || point > points[i - 1]!);
}

/**
 * The noise that earns half of what a reading without noise would; null where that would earn
 * nothing.
 *
 * Accuracy: 1e-8 relative; 1e-3 with tabulated predictives.
 */
export function halfGainSd(mixture: readonly Weighted[]): number | null {
  const least = leastSd(mixture);
  const whole = least === null ? 0 : informationGain(mixture, least);
  if (least === null || whole < 1e-9) return null;
  let lower = least;
  let upper = 2 * least;
  for (let tries = 0; informationGain(mixture, upper) > whole / 2; tries += 1) {
    if (tries === 200) return null;
    lower = upper;
    upper *= 2;
  }
  const enough = isTabulated(mixture) ? 1e-5 : 1e-9;
  while (upper - lower > enough * upper) {
    const middle = (lower + upper) / 2;
    if (informationGain(mixture, middle) > whole / 2) lower = middle;
    else upper = middle;
  }
  return (lower + upper) / 2;
}

/** Small against everything in the mixture; null where all of it is one and the same. */
function leastSd(mixture: readonly Weighted[]): number | null {
  const floor = Math.max(...mixture.map(({ predictive }) => predictive.floor));
  if (floor > 0) return Math.sqrt(floor);
  const sizes = mixture.flatMap(({ predictive: { sd, mean } }) => [
    sd,
    ...mixture.map(({ predictive }) => Math.abs(predictive.mean - mean)),
  ]);
  const above = sizes.filter((size) => size > 0);
  return above.length === 0 ? null : 1e-4 * Math.min(...above);
}

/** Points on which a Bayes factor's crossings are looked for, between two edges. */
const GRID = 64;

/**
 * The probability that log10 B of two hypotheses ends at 1 or more in size, the reading drawn from
 * the mixture of all.
 *
 * @param log10B today's, of the first against the second
 */
export function decisiveProbability(
  mixture: readonly Weighted[],
  {
    first,
    second,
    log10B,
    sd,
  }: { first: Predictive; second: Predictive; log10B: number; sd: number },
): number {
  const total = (y: number) => {
    const moved = (logDensity(first, y, sd) - logDensity(second, y, sd)) / Math.LN10;
    return Math.abs(log10B + (Number.isNaN(moved) ? 0 : moved)) - 1;
  };
  const edges = edgesOf(mixture, sd);
  const points: number[] = [];
  for (let i = 1; i < edges.length; i += 1) {
    for (let k = 0; k < GRID; k += 1) {
      points.push(edges[i - 1]! + ((edges[i]! - edges[i - 1]!) * k) / GRID);
    }
  }
  points.push(edges.at(-1)!);
  let probability = 0;
  let from = -Infinity;
  let inside = total(points[0]!) >= 0;
  for (let i = 1; i < points.length; i += 1) {
    const now = total(points[i]!) >= 0;
    if (now === inside) continue;
    const crossing = crossingOf(total, points[i - 1]!, points[i]!);
    if (inside) probability += massBetween(mixture, sd, from, crossing);
    from = crossing;
    inside = now;
  }
  if (inside) probability += massBetween(mixture, sd, from, Infinity);
  return Math.min(probability, 1);
}

function crossingOf(f: (y: number) => number, a: number, b: number): number {
  const sign = f(a) >= 0;
  let [lower, upper] = [a, b];
  for (let i = 0; i < 60; i += 1) {
    const middle = (lower + upper) / 2;
    if (f(middle) >= 0 === sign) lower = middle;
    else upper = middle;
  }
  return (lower + upper) / 2;
}

function massBetween(
  mixture: readonly Weighted[],
  sd: number,
  lower: number,
  upper: number,
): number {
  let mass = 0;
  for (const { posterior, predictive } of mixture) {
    const own = Math.max(sd * sd - predictive.floor, 0);
    for (const { weight, mean, variance } of predictive.components) {
      const spread = Math.sqrt(variance + own);
      const part = normalCdf((upper - mean) / spread) - normalCdf((lower - mean) / spread);
      mass += posterior * weight * part;
    }
  }
  return mass;
}
