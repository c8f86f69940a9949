import { deviance, stirlingError } from "./incomplete-gamma";
import { LN_SQRT_2PI } from "./normal";

/**
 * P(X >= k) for X ~ Binomial(n, p): from its largest term on where k is above the mean, else 1 minus
 * the terms below.
 *
 * @param k and n integers, 0 <= k <= n
 * @param p 0 to 1
 * @returns probability; relative error below 1e-12 down to 1e-300 for n <= 1000, (1 + n / 1000)
 *   times that beyond
 * Source: C. Loader, Fast and accurate computation of binomial probabilities (2000). Reference
 * values: fixtures/binomial-tails.json (mpmath).
 */
export function binomialUpperTail(k: number, n: number, p: number): number {
  if (k <= 0 || p === 1) return 1;
  if (k > n || p === 0) return 0;
  if (k > n * p) return Math.exp(logTerm(k, n, p)) * relativeTail(k, n, p / (1 - p));
  // The terms below k, counted as failures: X < k means n - X > n - k.
  return 1 - Math.exp(logTerm(k - 1, n, p)) * relativeTail(n - k + 1, n, (1 - p) / p);
}

/** The terms from k on over the first of them; they fall. */
function relativeTail(k: number, n: number, odds: number): number {
  let term = 1;
  let sum = 1;
  for (let j = k; j < n && term > sum * 2 ** -54; j += 1) {
    term *= ((n - j) / (j + 1)) * odds;
    sum += term;
  }
  return sum;
}

/** ln of n! / (k! (n - k)!) p^k (1 - p)^(n - k) for 0 < p < 1. */
function logTerm(k: number, n: number, p: number): number {
  if (k === 0) return n * Math.log1p(-p);
  if (k === n) return n * Math.log(p);
  const stirling = stirlingError(n) - stirlingError(k) - stirlingError(n - k);
  const away = deviance(k, n * p) + deviance(n - k, n * (1 - p));
  return stirling - away - LN_SQRT_2PI - Math.log((k / n) * (n - k)) / 2;
}
