import gamma from "@stdlib/math-base-special-gamma";
import gamma1pm1 from "@stdlib/math-base-special-gamma1pm1";
import gammaln from "@stdlib/math-base-special-gammaln";
import { LN_SQRT_2PI } from "./normal";

const EPSILON = 2 ** -53;

/**
 * Regularised lower incomplete gamma function, P(a, x) = integral_0^x t^(a-1) e^-t dt / Gamma(a).
 *
 * Power series for x below a + 1, else 1 - Q. About 9 sqrt(a) steps at worst.
 *
 * @param a > 0
 * @param x >= 0; Infinity allowed
 * @returns 0 to 1; relative error below 1e-12 down to 1e-300
 * Source: Abramowitz & Stegun 6.5.29. Reference values: fixtures/gamma-tails.json (mpmath).
 */
export function lowerGammaRatio(a: number, x: number): number {
  if (x <= 0) return 0;
  if (x === Infinity) return 1;
  return bySeries(a, x) ? lowerSeries(a, x) : 1 - upperFraction(a, x);
}

/**
 * Regularised upper incomplete gamma function, Q(a, x) = 1 - P(a, x), without that difference where
 * it would cancel: Lentz's continued fraction for large x; for a < 1 and small x
 *
 *   Q = -(x^a / Gamma(1 + a) - 1) - x^a / Gamma(1 + a) * a * sum_k (-x)^k / ((a + k) k!)
 *
 * @param a > 0
 * @param x >= 0; Infinity allowed
 * @returns 0 to 1; relative error below 1e-12 down to 1e-300
 * Source: Abramowitz & Stegun 6.5.29, 6.5.31. Reference values: fixtures/gamma-tails.json (mpmath).
 */
export function upperGammaRatio(a: number, x: number): number {
  if (x <= 0) return 1;
  // e^-x is 0 long before; the fraction's terms would overflow from 1e154 on.
  if (x > 1e100 && x > 2 * a) return 0;
  if (!bySeries(a, x)) return upperFraction(a, x);
  return a < 1 ? upperSmall(a, x) : 1 - lowerSeries(a, x);
}

/**
 * ln(x^a e^-x / Gamma(a + 1)), the log of a Poisson probability of a at mean x, a real.
 *
 * From a = 10 on by the deviance a d(x / a), which doesn't cancel, and the error of Stirling's
 * formula.
 *
 * @param a >= 0
 * @param x > 0
 * @returns <= 0; error below 1e-14 times the larger of 1 and its size
 * Source: C. Loader, Fast and accurate computation of binomial probabilities (2000).
 */
export function logGammaKernel(a: number, x: number): number {
  if (a < 10) return a * Math.log(x) - x - gammaln(a + 1);
  return -deviance(a, x) - stirlingError(a) - LN_SQRT_2PI - Math.log(a) / 2;
}

/** a ln(a / x) + x - a >= 0, to a few eps of itself where x is near a. */
export function deviance(a: number, x: number): number {
  const d = (x - a) / a;
  if (d < -0.6 || d > 1.5) return a * (d - Math.log(x / a));
  // ln(1 + d) = 2 artanh v, and d - 2 v = v d.
  const v = d / (2 + d);
  const square = v * v;
  let sum = 0;
  let power = 1;
  for (let k = 3; k < 100; k += 2) {
    const next = sum + power / k;
    if (next === sum) break;
    sum = next;
    power *= square;
  }
  return a * (v * d - 2 * v * square * sum);
}

/**
 * ln Gamma(a + 1) - [(a + 1/2) ln a - a + ln sqrt(2 pi)]: by its asymptotic series from a = 10 on,
 * below as that difference, to 1e-14 absolute.
 *
 * @param a > 0
 * Source: Abramowitz & Stegun 6.1.41; the first term left out is below 3e-17 at a = 10.
 */
export function stirlingError(a: number): number {
  if (a < 10) return gammaln(a + 1) - (a + 0.5) * Math.log(a) + a - LN_SQRT_2PI;
  const s = 1 / (a * a);
  const inner = 1 / 1188 - s * (691 / 360360 - s * (1 / 156 - s * (3617 / 122400)));
  return (1 / 12 - s * (1 / 360 - s * (1 / 1260 - s * (1 / 1680 - s * inner)))) / a;
}

function bySeries(a: number, x: number): boolean {
  return a < 1 ? x < 1.1 : x < a + 1;
}

/** x^a e^-x / Gamma(a + 1); the exponential in two halves, since alone it underflows first. */
function kernel(a: number, x: number): number {
  if (a >= 10) return Math.exp(logGammaKernel(a, x));
  const half = Math.exp(-x / 2);
  return ((x ** a * half) / gamma(a + 1)) * half;
}

function lowerSeries(a: number, x: number): number {
  let term = 1;
  let sum = 1;
  for (let k = 1; term > sum * EPSILON; k += 1) {
    term *= x / (a + k);
    sum += term;
  }
  return kernel(a, x) * sum;
}

function upperFraction(a: number, x: number): number {
  // Gamma(a, x) = x^a e^-x / (x + 1 - a - 1 (1 - a) / (x + 3 - a - 2 (2 - a) / ...))
  const tiny = 1e-290;
  let b = x + 1 - a;
  let c = 1 / tiny;
  let d = 1 / b;
  let fraction = d;
  for (let k = 1; k < 1e8; k += 1) {
    const numerator = -k * (k - a);
    b += 2;
    d = numerator * d + b;
    if (Math.abs(d) < tiny) d = tiny;
    c = b + numerator / c;
    if (Math.abs(c) < tiny) c = tiny;
    d = 1 / d;
    const change = d * c;
    fraction *= change;
    if (Math.abs(change - 1) <= 2 * EPSILON) break;
  }
  return kernel(a, x) * a * fraction;
}

function upperSmall(a: number, x: number): number {
  let sum = 0;
  let term = 1;
  for (let k = 1; k < 60; k += 1) {
    term *= -x / k;
    const next = sum + term / (a + k);
    if (next === sum) break;
    sum = next;
  }
  const minusOne = Math.expm1(a * Math.log(x) - Math.log1p(gamma1pm1(a)));
  return -minusOne - (1 + minusOne) * a * sum;
}
