import { LN_SQRT_2PI, normalCdf, normalUpperQuantile } from "./normal";
import { NumericsError } from "./numerics-error";

/**
 * Two half-normals joined at the mode into one continuous density,
 *
 *   sqrt(2 / pi) / (plus + minus) * exp(-(x - mode)^2 / (2 s^2)), s = plus above, minus below,
 *
 * so that the mode is exceeded with probability plus / (plus + minus). plus and minus > 0.
 * Source: Fechner (1897); Wallis, Stat. Sci. 29 (2014) 106.
 */
export interface SplitNormal {
  mode: number;
  plus: number;
  minus: number;
}

/** Log of the density; error of a few eps of the larger of 1 and its size. */
export function logSplitNormalPdf(x: number, { mode, plus, minus }: SplitNormal): number {
  const z = (x - mode) / (x < mode ? minus : plus);
  return Math.LN2 - LN_SQRT_2PI - Math.log(plus + minus) - (z * z) / 2;
}

/** P(X <= x); relative error below 1e-12 down to 1e-300. */
export function splitNormalCdf(x: number, { mode, plus, minus }: SplitNormal): number {
  const total = plus + minus;
  return x < mode
    ? ((2 * minus) / total) * normalCdf((x - mode) / minus)
    : 1 - ((2 * plus) / total) * normalCdf((mode - x) / plus);
}

/** P(X > x); relative error below 1e-12 down to 1e-300. */
export function splitNormalUpperTail(x: number, { mode, plus, minus }: SplitNormal): number {
  return splitNormalCdf(-x, { mode: -mode, plus: minus, minus: plus });
}

/**
 * The x that P(X <= x) = p holds for.
 *
 * @param p 0 to 1; its ends give infinities
 * @returns x; (x - mode) / (plus + minus) right to 1e-14 of the larger of 1 and its size, beside
 *   what p's own last digit is worth
 * @throws {NumericsError} `out-of-domain`
 */
export function splitNormalQuantile(p: number, { mode, plus, minus }: SplitNormal): number {
  if (!(p >= 0 && p <= 1)) {
    throw new NumericsError("out-of-domain", `a quantile needs 0 <= p <= 1; found ${p}`);
  }
  const total = plus + minus;
  return p * total < minus
    ? mode - minus * normalUpperQuantile((p * total) / (2 * minus))
    : mode + plus * normalUpperQuantile(((1 - p) * total) / (2 * plus));
}
