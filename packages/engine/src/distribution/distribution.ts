import {
  gammaCdf,
  gammaQuantile,
  gammaUpperTail,
  type GammaDistribution,
} from "@weighhouse/numerics/gamma-distribution";
import { normalCdf, normalInterval, normalQuantile } from "@weighhouse/numerics/normal";
import {
  splitNormalCdf,
  splitNormalQuantile,
  splitNormalUpperTail,
  type SplitNormal,
} from "@weighhouse/numerics/split-normal";
import { densityQuantile, densityTail, massBetween, type Density } from "./density";
import { drawsBelow, drawsQuantile, type Draws } from "./draws";

/** What is known, or said, of one number: a measurand's true value, or a prediction's. */
export type Distribution =
  | { kind: "normal"; mean: number; sd: number }
  | ({ kind: "splitNormal" } & SplitNormal)
  | ({ kind: "gamma" } & GammaDistribution)
  | { kind: "uniform"; lower: number; upper: number }
  | Density
  | Draws
  | Mixture
  | Image;

/** Known by its distribution function alone, which is 0 below `lower` and 1 from `upper` on. */
export interface Image {
  kind: "image";
  cdf(x: number): number;
  lower: number;
  upper: number;
  mean: number;
  sd: number;
}

/** Distributions with weights that add up to 1. */
export interface Mixture {
  kind: "mixture";
  parts: readonly { weight: number; of: Distribution }[];
}

/** P(X <= x), right to its own size (draws: to one of them). */
export function cdf(of: Distribution, x: number): number {
  switch (of.kind) {
    case "normal":
      return of.sd > 0 ? normalCdf((x - of.mean) / of.sd) : x >= of.mean ? 1 : 0;
    case "splitNormal":
      return splitNormalCdf(x, of);
    case "gamma":
      return x > 0 ? gammaCdf(x, of) : 0;
    case "uniform":
      return clampShare((x - of.lower) / (of.upper - of.lower));
    case "density":
      return densityTail(of, x, "lower");
    case "draws":
      return drawsBelow(of, x) / of.sorted.length;
    case "image":
      return of.cdf(x);
    case "mixture":
      return summed(of, (part) => cdf(part, x));
  }
}

/** P(X > x), right to its own size. */
export function upperTail(of: Distribution, x: number): number {
  switch (of.kind) {
    case "normal":
      return of.sd > 0 ? normalCdf((of.mean - x) / of.sd) : x < of.mean ? 1 : 0;
    case "splitNormal":
      return splitNormalUpperTail(x, of);
    case "gamma":
      return x > 0 ? gammaUpperTail(x, of) : 1;
    case "uniform":
      return clampShare((of.upper - x) / (of.upper - of.lower));
    case "density":
      return densityTail(of, x, "upper");
    case "draws":
      return 1 - drawsBelow(of, x) / of.sorted.length;
    case "image":
      return 1 - of.cdf(x);
    case "mixture":
      return summed(of, (part) => upperTail(part, x));
  }
}

/** P(lower <= X <= upper). */
export function within(of: Distribution, lower: number, upper: number): number {
  if (!(lower <= upper)) return 0;
  if (of.kind === "normal" && of.sd > 0) {
    return normalInterval((lower - of.mean) / of.sd, (upper - of.mean) / of.sd);
  }
  if (of.kind === "density") return massBetween(of, lower, upper);
  // Subtracting on the side of the smaller tails keeps what there is.
  const [below, above] = [cdf(of, lower), upperTail(of, upper)];
  return below < 0.5
    ? Math.max(0, cdf(of, upper) - below)
    : Math.max(0, upperTail(of, lower) - above);
}

/** The x that P(X <= x) = p holds for; p in (0, 1). */
export function quantile(of: Distribution, p: number): number {
  switch (of.kind) {
    case "normal":
      return of.mean + of.sd * normalQuantile(p);
    case "splitNormal":
      return splitNormalQuantile(p, of);
    case "gamma":
      return gammaQuantile(p, of);
    case "uniform":
      return of.lower + p * (of.upper - of.lower);
    case "density":
      return densityQuantile(of, p);
    case "draws":
      return drawsQuantile(of, p);
    case "image":
      return quantileBetween(of, p, of);
    case "mixture":
      return mixtureQuantile(of, p);
  }
}

export function meanOf(of: Distribution): number {
  switch (of.kind) {
    case "splitNormal":
      return of.mode + (of.plus - of.minus) * ROOT_2_OVER_PI;
    case "gamma":
      return of.shape * of.scale;
    case "uniform":
      return (of.lower + of.upper) / 2;
    case "mixture":
      return summed(of, meanOf);
    default:
      return of.mean;
  }
}

export function sdOf(of: Distribution): number {
  switch (of.kind) {
    case "splitNormal": {
      const spread = (1 - 2 / Math.PI) * (of.plus - of.minus) ** 2 + of.plus * of.minus;
      return Math.sqrt(spread);
    }
    case "gamma":
      return Math.sqrt(of.shape) * of.scale;
    case "uniform":
      return (of.upper - of.lower) / Math.sqrt(12);
    case "mixture": {
      const mean = meanOf(of);
      return Math.sqrt(summed(of, (part) => sdOf(part) ** 2 + (meanOf(part) - mean) ** 2));
    }
    default:
      return of.sd;
  }
}

const ROOT_2_OVER_PI = Math.sqrt(2 / Math.PI);

function summed({ parts }: Mixture, f: (part: Distribution) => number): number {
  let sum = 0;
  for (const { weight, of } of parts) sum += weight * f(of);
  return sum;
}

function clampShare(share: number): number {
  return Math.min(Math.max(share, 0), 1);
}

/** Between the parts' own quantiles, which it can't be outside of. */
function mixtureQuantile(of: Mixture, p: number): number {
  let [lower, upper] = [Infinity, -Infinity];
  for (const part of of.parts) {
    if (part.weight === 0) continue;
    const own = quantile(part.of, p);
    lower = Math.min(lower, own);
    upper = Math.max(upper, own);
  }
  return quantileBetween(of, p, { lower, upper });
}

/** By chords of the distribution function, and halves where those are slow. */
function quantileBetween(
  of: Distribution,
  p: number,
  { lower, upper }: { lower: number; upper: number },
): number {
  let [a, b] = [lower, upper];
  let [atA, atB] = [cdf(of, a) - p, cdf(of, b) - p];
  for (let step = 0; step < 300 && b - a > 1e-15 * Math.max(Math.abs(a), Math.abs(b)); step += 1) {
    const chord = a - (atA * (b - a)) / (atB - atA);
    const x = step % 3 < 2 && chord > a && chord < b ? chord : (a + b) / 2;
    if (x === a || x === b) break;
    const at = cdf(of, x) - p;
    if (at < 0) [a, atA] = [x, at];
    else [b, atB] = [x, at];
    if (at === 0) return x;
  }
  return (a + b) / 2;
}
