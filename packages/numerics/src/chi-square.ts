import { upperGammaRatio } from "./incomplete-gamma";
import { NumericsError } from "./numerics-error";

/**
 * Upper tail of the chi-square distribution, P(chi2_dof > x) = Q(dof / 2, x / 2).
 *
 * Goes by the upper incomplete gamma function, not by 1 - cdf, which is 0 from p = 1e-16 on.
 *
 * @param x >= 0; Infinity gives 0
 * @param dof degrees of freedom, > 0
 * @returns probability; relative error below 1e-12 down to 1e-300, 0 where it underflows
 * @throws {NumericsError} `out-of-domain`
 * Source: Abramowitz & Stegun 26.4. Reference values: test/reference, chi2.tail_grid (mpmath).
 */
export function chiSquareUpperTail(x: number, dof: number): number {
  if (!(x >= 0) || !(dof > 0)) {
    throw new NumericsError(
      "out-of-domain",
      `chi-square needs x >= 0 and dof > 0; found x = ${x}, dof = ${dof}`,
    );
  }
  return upperGammaRatio(dof / 2, x / 2);
}
