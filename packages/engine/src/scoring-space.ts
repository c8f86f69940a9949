/**
 * Where values are compared (section 1 of the statistics): themselves on a linear scale, their
 * log10 on a log10 scale. Every density is over this space, so its Jacobian is every hypothesis's.
 */
export type ScoredScale = "linear" | "log10";

export function toScoringSpace(value: number, scale: ScoredScale): number {
  return scale === "log10" ? Math.log10(value) : value;
}

/** Back in the observable's unit. */
export function toNatural(value: number, scale: ScoredScale): number {
  return scale === "log10" ? 10 ** value : value;
}

/** A standard uncertainty in the observable's unit, in scoring space: sd / (value ln 10) on log10. */
export function sdInScoringSpace(sd: number, value: number, scale: ScoredScale): number {
  return scale === "log10" ? sd / (value * Math.LN10) : sd;
}

/** The width of an interval; on log10 without the cancellation of two logarithms. */
export function widthInScoringSpace(
  { lower, upper }: { lower: number; upper: number },
  scale: ScoredScale,
): number {
  if (scale === "linear") return upper - lower;
  return upper < 2 * lower
    ? Math.log1p((upper - lower) / lower) / Math.LN10
    : Math.log10(upper) - Math.log10(lower);
}

/**
 * An interval back in the observable's unit. An exact prediction's is the number that was given,
 * not what two logarithms make of it.
 */
export function naturalInterval(
  prediction: { natural: number; lower: number; upper: number },
  scale: ScoredScale,
): { lower: number; upper: number } {
  const { natural, lower, upper } = prediction;
  if (lower === upper) return { lower: natural, upper: natural };
  return { lower: toNatural(lower, scale), upper: toNatural(upper, scale) };
}
