import { LN_SQRT_2PI, truncatedNormalQuantile } from "@weighhouse/numerics/normal";
import type { OuterUnknown } from "./problem";

/** What the caller knows of an unknown's place in the block. */
export interface OuterPlace {
  counted: boolean;
  breaks?: readonly number[];
}

/** Mean + sd c, c ~ N(0, 1). */
export function normalUnknown(mean: number, sd: number, place: OuterPlace): OuterUnknown {
  return onLine((c) => mean + sd * c, place);
}

/** exp(mu + sigma c), c ~ N(0, 1). */
export function lognormalUnknown(mu: number, sigma: number, place: OuterPlace): OuterUnknown {
  return onLine((c) => Math.exp(mu + sigma * c), place);
}

/** sd c, c ~ N(0, 1) cut to c >= 0. */
export function halfNormalUnknown(sd: number, { counted, breaks = [] }: OuterPlace): OuterUnknown {
  return {
    lower: 0,
    upper: Infinity,
    lnPrior: (c) => (c < 0 ? -Infinity : Math.LN2 - (c * c) / 2 - LN_SQRT_2PI),
    quantile: (u) => truncatedNormalQuantile(0, Infinity, u),
    valueAt: (c) => sd * c,
    penalised: true,
    breaks,
    counted,
  };
}

/**
 * Two half-normals joined at 0: plus c above, minus c below. The density over the value is
 * continuous, so that each side has a share of the probability as its width; over c it jumps at 0.
 */
export function splitNormalUnknown(
  { plus, minus }: { plus: number; minus: number },
  { counted, breaks = [] }: OuterPlace,
): OuterUnknown {
  const whole = plus + minus;
  const below = minus / whole;
  return {
    lower: -Infinity,
    upper: Infinity,
    lnPrior: (c) => Math.log((2 * (c < 0 ? minus : plus)) / whole) - (c * c) / 2 - LN_SQRT_2PI,
    quantile: (u) =>
      u < below
        ? truncatedNormalQuantile(-Infinity, 0, u / below)
        : truncatedNormalQuantile(0, Infinity, (u - below) / (1 - below)),
    valueAt: (c) => (c < 0 ? minus : plus) * c,
    penalised: true,
    breaks: [...breaks, 0],
    counted,
  };
}

/** Flat; c is the value itself minus the lower bound, so that narrow ones far from 0 keep digits. */
export function uniformUnknown(
  { lower, upper, width = upper - lower }: { lower: number; upper: number; width?: number },
  { counted, breaks = [] }: OuterPlace,
): OuterUnknown {
  const ln = -Math.log(width);
  return {
    lower: 0,
    upper: width,
    lnPrior: (c) => (c < 0 || c > width ? -Infinity : ln),
    quantile: (u) => u * width,
    valueAt: (c) => (c === width ? upper : lower + c),
    penalised: false,
    breaks,
    counted,
  };
}

/** Flat in the logarithm; c = ln(value / lower). */
export function loguniformUnknown(
  { lower, upper }: { lower: number; upper: number },
  { counted, breaks = [] }: OuterPlace,
): OuterUnknown {
  const width = Math.log(upper / lower);
  return {
    ...uniformUnknown({ lower: 0, upper: width }, { counted, breaks }),
    valueAt: (c) => (c === width ? upper : lower * Math.exp(c)),
  };
}

function onLine(
  valueAt: (c: number) => number,
  { counted, breaks = [] }: OuterPlace,
): OuterUnknown {
  return {
    lower: -Infinity,
    upper: Infinity,
    lnPrior: (c) => -(c * c) / 2 - LN_SQRT_2PI,
    quantile: (u) => truncatedNormalQuantile(-Infinity, Infinity, u),
    valueAt,
    penalised: true,
    breaks,
    counted,
  };
}
