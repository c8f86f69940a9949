import { LN_SQRT_2PI, logNormalInterval } from "./normal";

/** Below this many standard deviations the integrand is constant over the interval. */
const CONSTANT = 1e-200;

/**
 * ln int_lower^upper exp(-(d t - shift)^2 / 2) dt.
 *
 * @param range lower < upper; `width` is their difference where that is known better than the two
 *   numbers tell it (an interval far from 0 and narrow)
 * @returns natural log; relative error of the integral below 1e-12
 */
export function logIntervalIntegral(
  d: number,
  shift: number,
  { lower, upper, width = upper - lower }: { lower: number; upper: number; width?: number },
): number {
  const size = Math.abs(d);
  if (size * width < CONSTANT) return Math.log(width) - (d * lower - shift) ** 2 / 2;
  const inside =
    d > 0
      ? logNormalInterval(d * lower - shift, d * upper - shift, size * width)
      : logNormalInterval(shift - d * lower, shift - d * upper, size * width);
  return LN_SQRT_2PI - Math.log(size) + inside;
}
