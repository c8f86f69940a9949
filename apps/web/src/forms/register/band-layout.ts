/** What the drawing of a prediction against the no-model range needs, in the observable's unit. */
export interface BandInput {
  scale: "linear" | "log10";
  /** The reference's range: its bounds, or its central two sds. */
  reference: { lower: number; upper: number };
  expected: number;
  /** What the prediction says the true value lies in; equal ends for an exact one. */
  band: { lower: number; upper: number };
  /** Measured values that would pass; null where none would. */
  passes: { lower: number; upper: number } | null;
}

/** Left and width in per cent of the drawing. */
export interface Span {
  left: number;
  width: number;
}

export interface BandLayout {
  reference: Span;
  band: Span;
  passes: Span | null;
  expected: number;
}

const marginShare = 0.04;

/**
 * Positions in per cent of the width, in scoring space, so that the drawing fits any width. The
 * axis holds the reference and the band, with 4 % on either side.
 */
export function layOutBand(input: BandInput): BandLayout {
  const place = input.scale === "log10" ? Math.log10 : (value: number) => value;
  const ends = [
    input.reference.lower,
    input.reference.upper,
    input.band.lower,
    input.band.upper,
    input.expected,
  ]
    .map(place)
    .filter(Number.isFinite);
  const low = Math.min(...ends);
  const width = Math.max(...ends) - low || 1;
  const start = low - marginShare * width;
  const whole = width * (1 + 2 * marginShare);
  const percent = (value: number) =>
    Math.min(100, Math.max(0, (100 * (place(value) - start)) / whole));
  const span = ({ lower, upper }: { lower: number; upper: number }): Span => {
    const left = percent(lower);
    return { left, width: Math.max(percent(upper) - left, 0) };
  };
  return {
    reference: span(input.reference),
    band: span(input.band),
    passes: input.passes === null ? null : span(input.passes),
    expected: percent(input.expected),
  };
}
