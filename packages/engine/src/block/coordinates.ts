import { LN_SQRT_2PI, truncatedNormalQuantile } from "@weighhouse/numerics/normal";
import type { OuterUnknown } from "./problem";

/** One axis of a numerical integral. */
export type Coordinate = Pick<OuterUnknown, "lower" | "upper" | "lnPrior" | "quantile" | "breaks">;

/** A direction of normal unknowns. */
export function normalCoordinate(breaks: readonly number[] = []): Coordinate {
  return {
    lower: -Infinity,
    upper: Infinity,
    lnPrior: (c) => -(c * c) / 2 - LN_SQRT_2PI,
    quantile: (u) => truncatedNormalQuantile(-Infinity, Infinity, u),
    breaks,
  };
}

/** A flat unknown. */
export function boundedCoordinate(
  { lower, upper }: { lower: number; upper: number },
  breaks: readonly number[] = [],
): Coordinate {
  const ln = -Math.log(upper - lower);
  return {
    lower,
    upper,
    lnPrior: () => ln,
    quantile: (u) => lower + u * (upper - lower),
    breaks,
  };
}

/** How an axis is laid onto (0, 1). */
export interface Axis {
  /** Writes c to into[j]. @returns ln dc/du */
  place(u: number, into: Float64Array, j: number): number;
  toUnit(c: number): number;
}
