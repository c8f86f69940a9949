import { logGammaKernel, lowerGammaRatio, upperGammaRatio } from "./incomplete-gamma";
import { NumericsError } from "./numerics-error";

/**
 * ln of the Poisson probability mean^n e^-mean / n!.
 *
 * @param n whole, >= 0
 * @param mean >= 0
 * @returns <= 0; relative error below 1e-14
 * @throws {NumericsError} `out-of-domain`
 * Source: Loader (2000), see logGammaKernel. Reference values: fixtures/gamma-tails.json (mpmath).
 */
export function logPoissonPmf(n: number, mean: number): number {
  checkCount(n, mean);
  if (mean === 0) return n === 0 ? 0 : -Infinity;
  return n === 0 ? -mean : logGammaKernel(n, mean);
}

/**
 * P(N <= n) = Q(n + 1, mean).
 *
 * @param n whole, >= 0
 * @param mean >= 0
 * @returns 0 to 1; relative error below 1e-12 down to 1e-300
 * @throws {NumericsError} `out-of-domain`
 * Source: Abramowitz & Stegun 26.4.21. Reference values: fixtures/gamma-tails.json (mpmath).
 */
export function poissonCdf(n: number, mean: number): number {
  checkCount(n, mean);
  return upperGammaRatio(n + 1, mean);
}

/**
 * P(N >= n) = P(n, mean), n itself included; 1 for n = 0.
 *
 * Domain, accuracy, errors and source as of `poissonCdf`.
 */
export function poissonUpperTail(n: number, mean: number): number {
  checkCount(n, mean);
  return n === 0 ? 1 : lowerGammaRatio(n, mean);
}

function checkCount(n: number, mean: number): void {
  if (!(Number.isInteger(n) && n >= 0 && mean >= 0 && mean < Infinity)) {
    throw new NumericsError(
      "out-of-domain",
      `a Poisson count needs n = 0, 1, 2... and a finite mean >= 0; found n = ${n}, mean = ${mean}`,
    );
  }
}
