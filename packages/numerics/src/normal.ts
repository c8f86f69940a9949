import erfc from "@stdlib/math-base-special-erfc";
import erfcinv from "@stdlib/math-base-special-erfcinv";
import erfcx from "@stdlib/math-base-special-erfcx";
import { gaussLegendre } from "./gauss-legendre";
import { NumericsError } from "./numerics-error";

export const LN_SQRT_2PI = 0.9189385332046727;

/**
 * Distribution function of the standard normal, Phi(z) = erfc(-z / sqrt 2) / 2.
 *
 * @param z in standard deviations; infinities allowed
 * @returns probability, relative error below 1e-13 down to 1e-300
 * Source: Abramowitz & Stegun 26.2. Reference values: test/reference, normal.tail (mpmath).
 */
export function normalCdf(z: number): number {
  return erfc(-z / Math.SQRT2) / 2;
}

/**
 * Log of the standard normal's distribution function, ln Phi(z), right however far in the tail:
 * below 0 by the scaled complement, ln Phi(z) = ln(erfcx(-z / sqrt 2) / 2) - z^2 / 2.
 *
 * @param z in standard deviations; infinities allowed
 * @returns <= 0; relative error below 1e-13
 * Reference values: test/reference, normal.log_cdf (mpmath).
 */
export function logNormalCdf(z: number): number {
  if (z === -Infinity) return -Infinity;
  return z < 0 ? Math.log(erfcx(-z / Math.SQRT2) / 2) - (z * z) / 2 : Math.log1p(-normalCdf(-z));
}

/** Log of the standard normal's density, -z^2 / 2 - ln sqrt(2 pi). */
export function logNormalPdf(z: number): number {
  return -(z * z) / 2 - LN_SQRT_2PI;
}

/**
 * The z that Phi(z) = p holds for.
 *
 * @param p 0 to 1; its ends give infinities
 * @returns z; relative error below 1e-14 for p <= 1/2 down to 1e-300 (above, 1 - p is what counts:
 *   `normalUpperQuantile` takes it directly)
 * @throws {NumericsError} `out-of-domain`
 * Reference values: fixtures/normal-quantile.json (mpmath).
 */
export function normalQuantile(p: number): number {
  return -normalUpperQuantile(p);
}

/**
 * The z that is exceeded with probability q, Q(z) = 1 - Phi(z) = q; right in the far tail.
 *
 * @param q 0 to 1; its ends give infinities
 * @returns sqrt 2 erfc^-1(2 q); relative error below 1e-14 for q <= 1/2 down to 1e-300
 * @throws {NumericsError} `out-of-domain`
 * Reference values: fixtures/normal-quantile.json (mpmath).
 */
export function normalUpperQuantile(q: number): number {
  if (!(q >= 0 && q <= 1)) {
    throw new NumericsError("out-of-domain", `a quantile needs a probability; found ${q}`);
  }
  const z = Math.SQRT2 * erfcinv(2 * q);
  if (z < 30 || z === Infinity) return z;
  // Out here erfcinv is right to 1e-13 only: one Newton step on ln Q, whose slope is -phi / Q.
  const logTail = logNormalCdf(-z);
  return z + (logTail - Math.log(q)) * Math.exp(logTail - logNormalPdf(z));
}

/**
 * Probability that a standard normal lies between two bounds, Phi(upper) - Phi(lower), without the
 * cancellation of that difference.
 *
 * @returns 0 to 1; relative error below 1e-12
 * @throws {NumericsError} `empty-interval` when upper < lower
 */
export function normalInterval(lower: number, upper: number): number {
  return lower === upper ? 0 : Math.exp(logNormalInterval(lower, upper));
}

/**
 * Log of the probability that a standard normal lies between two bounds.
 *
 *   ln(Phi(upper) - Phi(lower))
 *
 * Bounds astride 0 are taken from 1, or added up from two erf's of one sign. Bounds on one side
 * are mirrored to the upper tail; there a narrow interval is integrated by 20 Gauss-Legendre
 * points (the difference would cancel), a wide one is the difference of scaled complements:
 *
 *   Q(a) - Q(b) = e^(-a^2/2) [erfcx(a / sqrt 2) - erfcx(b / sqrt 2) e^(-(b-a)(b+a)/2)] / 2
 *
 * @param lower bound, in standard deviations; -Infinity allowed
 * @param upper bound, >= lower; Infinity allowed
 * @param width upper - lower, > 0, where that is known better than the two bounds tell it: far out
 *   in a tail those of a narrow interval may be one number
 * @returns natural log, <= 0; relative error below 1e-12 for |bounds| <= 1e4
 * @throws {NumericsError} `empty-interval` when the width isn't above 0
 * Source: Abramowitz & Stegun 26.2. Reference values: fixtures/log-normal-interval.json (mpmath).
 */
export function logNormalInterval(lower: number, upper: number, width = upper - lower): number {
  if (!(width > 0)) {
    throw new NumericsError(
      "empty-interval",
      `an interval needs lower < upper; found ${lower} and ${upper}`,
    );
  }
  if (lower === -Infinity && upper === Infinity) return 0;
  if (lower < 0 && upper > 0) return logAstride(lower, upper);
  return lower >= 0 ? logUpperSide(lower, upper, width) : logUpperSide(-upper, -lower, width);
}

function logAstride(lower: number, upper: number): number {
  const outside = normalCdf(lower) + normalCdf(-upper);
  if (outside < 0.5) return Math.log1p(-outside);
  // Both halves are positive, so they add up without loss.
  return Math.log(
    Math.exp(logUpperSide(0, upper, upper)) + Math.exp(logUpperSide(0, -lower, -lower)),
  );
}

function logUpperSide(a: number, b: number, width: number): number {
  if (b === Infinity) return logNormalCdf(-a);
  const drop = (width * (a + b)) / 2;
  if (width < 1 && drop < 1) {
    // phi(a) times the integral of exp(-a s - s^2 / 2) over [0, width]: smooth, of order one.
    const integral = gaussLegendre((s) => Math.exp(-s * (a + s / 2)), 0, width);
    return -(a * a) / 2 - LN_SQRT_2PI + Math.log(integral);
  }
  const scaled = erfcx(a / Math.SQRT2) - erfcx(b / Math.SQRT2) * Math.exp(-drop);
  return -(a * a) / 2 + Math.log(scaled / 2);
}

/**
 * The value u in [lower, upper] that a share p of the standard normal's mass there lies below:
 * Phi(u) = Phi(lower) + p (Phi(upper) - Phi(lower)).
 *
 * In the tails by Newton steps on ln Q, where Phi itself is 0 or 1.
 *
 * @param p 0 to 1
 * @returns u, clamped to the bounds; Phi(u) right to 1e-9 of the interval's mass
 */
export function truncatedNormalQuantile(lower: number, upper: number, p: number): number {
  if (lower > 4) return tailQuantile(lower, upper, p);
  if (upper < -4) return -tailQuantile(-upper, -lower, 1 - p);
  const target = normalCdf(lower) + p * normalInterval(lower, upper);
  // From the side on which the probability is the smaller number, and so the more exact one.
  const value =
    target < 0.5
      ? normalQuantile(target)
      : normalUpperQuantile(normalCdf(-upper) + (1 - p) * normalInterval(lower, upper));
  return Math.min(Math.max(value, lower), upper);
}

function tailQuantile(lower: number, upper: number, p: number): number {
  const logQ = logNormalCdf(-lower);
  const mass = -Math.expm1(logNormalCdf(-upper) - logQ);
  const target = logQ + Math.log1p(-p * mass);
  if (!(target > -Infinity)) return upper;
  // ln Q is concave with slope about -u, so Newton from the left end closes in from one side.
  let u = Math.sqrt(lower * lower + 2 * (logQ - target));
  for (let step = 0; step < 20; step += 1) {
    const value = logNormalCdf(-u);
    const slope = -Math.exp(-(u * u) / 2 - LN_SQRT_2PI - value);
    const next = u - (value - target) / slope;
    if (Math.abs(next - u) <= 1e-14 * u) break;
    u = next;
  }
  return Math.min(Math.max(u, lower), upper);
}
