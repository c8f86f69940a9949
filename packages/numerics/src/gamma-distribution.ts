import { logGammaKernel, lowerGammaRatio, upperGammaRatio } from "./incomplete-gamma";
import { normalQuantile } from "./normal";
import { NumericsError } from "./numerics-error";

/** Density x^(shape - 1) e^(-x / scale) / (Gamma(shape) scale^shape) on x >= 0. */
export interface GammaDistribution {
  shape: number;
  scale: number;
}

/**
 * The gamma distribution of a given mean and sd: shape = (mean / sd)^2, scale = sd^2 / mean.
 *
 * @throws {NumericsError} `out-of-domain` unless mean and sd are finite and > 0, and their ratio within 1e-150 to 1e150
 */
export function gammaFromMoments(mean: number, sd: number): GammaDistribution {
  const shape = (mean / sd) ** 2;
  const scale = sd * (sd / mean);
  // Both of them also refuse ratios beyond 1e150.
  if (!(mean > 0 && sd > 0 && shape > 0 && scale > 0 && shape < Infinity && scale < Infinity)) {
    throw new NumericsError(
      "out-of-domain",
      `a gamma distribution needs mean > 0 and sd > 0; found mean = ${mean}, sd = ${sd}`,
    );
  }
  return { shape, scale };
}

/**
 * Log of the density.
 *
 * @param x any; -Infinity below 0
 * @returns natural log; error below 1e-14 times the larger of 1, its size and |x / scale - shape|
 * Reference values: fixtures/gamma-tails.json (mpmath).
 */
export function logGammaPdf(x: number, { shape, scale }: GammaDistribution): number {
  if (x < 0 || x === Infinity) return -Infinity;
  if (x === 0) return shape === 1 ? -Math.log(scale) : shape > 1 ? -Infinity : Infinity;
  const t = x / scale;
  return logGammaKernel(shape, t) + Math.log(shape) - Math.log(x);
}

/** P(X <= x); relative error below 1e-12 down to 1e-300, beside that of x / scale. */
export function gammaCdf(x: number, { shape, scale }: GammaDistribution): number {
  return lowerGammaRatio(shape, x / scale);
}

/** P(X > x); relative error below 1e-12 down to 1e-300, beside that of x / scale. */
export function gammaUpperTail(x: number, { shape, scale }: GammaDistribution): number {
  return upperGammaRatio(shape, x / scale);
}

/**
 * The x that P(X <= x) = p holds for, by Newton steps on the log of the smaller tail, kept between
 * bounds that close in.
 *
 * @param p 0 to 1; 0 gives 0, 1 Infinity
 * @returns x; relative error below 1e-12, beside what p's own last digit is worth; 0 where x is
 *   below the smallest number
 * @throws {NumericsError} `out-of-domain`
 */
export function gammaQuantile(p: number, { shape, scale }: GammaDistribution): number {
  if (!(p >= 0 && p <= 1)) {
    throw new NumericsError("out-of-domain", `a quantile needs 0 <= p <= 1; found ${p}`);
  }
  if (p === 0) return 0;
  if (p === 1) return Infinity;
  return scale * standardQuantile(p, shape);
}

function standardQuantile(p: number, shape: number): number {
  const lowerSide = p <= 0.5;
  const target = Math.log(lowerSide ? p : 1 - p);
  let low = -Infinity;
  let high = Infinity;
  let u = firstGuess(p, shape);
  for (let step = 0; step < 200; step += 1) {
    const x = Math.exp(u);
    if (x === 0) return 0;
    const tail = lowerSide ? lowerGammaRatio(shape, x) : upperGammaRatio(shape, x);
    const excess = Math.log(tail) - target;
    const below = lowerSide ? excess < 0 : excess > 0;
    if (below) low = u;
    else high = u;
    const slope = (Math.exp(logGammaKernel(shape, x)) * shape) / tail;
    const move = (lowerSide ? -excess : excess) / slope;
    // From x itself: u has fewer digits of it.
    if (Math.abs(move) <= 1e-14 * Math.max(1, Math.abs(u))) return x * Math.exp(move);
    let next = u + move;
    if (!(next > low && next < high)) next = between(low, high, u);
    if (next === u) return x;
    u = next;
  }
  return Math.exp(u);
}

function between(low: number, high: number, u: number): number {
  if (low === -Infinity) return u - 1 - Math.abs(u);
  if (high === Infinity) return u + 1;
  return (low + high) / 2;
}

/** Wilson and Hilferty's cube, or the series' first term where that is no good. */
function firstGuess(p: number, shape: number): number {
  const c = 1 / (9 * shape);
  const cube = 1 - c + normalQuantile(p) * Math.sqrt(c);
  if (shape >= 1 && cube > 0.1) return Math.log(shape) + 3 * Math.log(cube);
  // p = x^a / Gamma(a + 1) near 0.
  const logGamma = logGammaKernel(shape, 1) + 1;
  return (Math.log(p) - logGamma) / shape;
}
