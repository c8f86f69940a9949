import type { Scale } from "@weighhouse/campaign/document";
import type { PredictionFrame } from "./frame";

/**
 * Where values are compared (section 1 of the statistics): themselves on linear, magnitude and
 * cyclic scales, their log10 on a log10 scale. Every density is over this space, so its Jacobian is
 * every hypothesis's.
 */
export function toScoringSpace(value: number, scale: Scale): number {
  return scale === "log10" ? Math.log10(value) : value;
}

/** Back in the observable's unit. */
export function toNatural(value: number, scale: Scale): number {
  return scale === "log10" ? 10 ** value : value;
}

/** A standard uncertainty in the observable's unit, in scoring space: sd / (value ln 10) on log10. */
export function sdInScoringSpace(sd: number, value: number, scale: Scale): number {
  return scale === "log10" ? sd / (value * Math.LN10) : sd;
}

/**
 * The two uncertainties of an asymmetric value: log10((value + plus) / value) and
 * log10(value / (value - minus)) on log10.
 */
export function sidesInScoringSpace(
  { plus, minus }: { plus: number; minus: number },
  value: number,
  scale: Scale,
): { plus: number; minus: number } {
  if (scale !== "log10") return { plus, minus };
  return {
    plus: Math.log1p(plus / value) / Math.LN10,
    minus: -Math.log1p(-minus / value) / Math.LN10,
  };
}

/** The width of an interval; on log10 without the cancellation of two logarithms. */
export function widthInScoringSpace(
  { lower, upper }: { lower: number; upper: number },
  scale: Scale,
): number {
  if (scale !== "log10") return upper - lower;
  return upper < 2 * lower
    ? Math.log1p((upper - lower) / lower) / Math.LN10
    : Math.log10(upper) - Math.log10(lower);
}

/** A difference on a circle, in (-period/2, period/2]; as it is where the period is 0. */
export function wrapped(difference: number, period: number): number {
  if (period === 0) return difference;
  return difference - period * Math.ceil(difference / period - 0.5);
}

/**
 * What a relative standard deviation is in scoring space: sd / ln 10 dex on log10, 2.5 sd / ln 10
 * magnitudes (what multiplies a flux by 1 + sd moves its magnitude by that).
 *
 * @returns null on linear, where it is that fraction of a value
 */
export function relativeSd(sd: number, scale: Scale): number | null {
  if (scale === "log10") return sd / Math.LN10;
  return scale === "magnitude" ? (2.5 * sd) / Math.LN10 : null;
}

/**
 * An interval back in the observable's unit. An exact prediction's is the number that was given,
 * not what two logarithms make of it.
 */
export function naturalInterval(
  { natural, interval }: Pick<PredictionFrame, "natural" | "interval">,
  scale: Scale,
): { lower: number | null; upper: number | null } {
  if (interval === null) return { lower: null, upper: null };
  const { lower, upper } = interval;
  if (lower === upper) return { lower: natural, upper: natural };
  return { lower: toNatural(lower, scale), upper: toNatural(upper, scale) };
}
