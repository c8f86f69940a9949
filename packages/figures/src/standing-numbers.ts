import {
  ABSENT,
  formatFixed,
  formatWithUncertainty,
  inPowersOfTen,
  MINUS,
  MINUS_INFINITY,
} from "./numbers";

/**
 * log10 of a Bayes factor to two decimals; nearer to zero, to one significant digit, so that a
 * difference is never shown as none. Null stands for a likelihood of zero.
 *
 * @param error standard error of the same log10, 0 or null for closed forms
 */
export function formatLog10B(value: number | null, error: number | null = null): string {
  if (value === null) return MINUS_INFINITY;
  if (error !== null && error > 0) return formatWithUncertainty(value, error);
  return logarithm(value);
}

/** ln of an evidence, as {@link formatLog10B}. */
export function formatLnEvidence(value: number | null, error: number | null = null): string {
  return formatLog10B(value, error);
}

/** A p-value: two significant digits, in powers of ten below 0.001. */
export function formatP(p: number | null): string {
  if (p === null) return ABSENT;
  if (p === 0) return "< 5\u00a0×\u00a010⁻³²⁴";
  return probability(p);
}

/**
 * A probability to two significant digits; in powers of ten below 0.001, and by what it lacks of
 * one above 0.999: `1 − 2.1 × 10⁻⁹`.
 */
export function formatPosterior(value: number | null): string {
  if (value === null) return ABSENT;
  if (value > 0.999 && value < 1) {
    const lack = 1 - value;
    // Below this the double's own rounding is what would be shown.
    return lack < 1e-14 ? "1" : `1 ${MINUS} ${inPowersOfTen(lack)}`;
  }
  return probability(value);
}

/** `18.20 / 21`, or an absence with nothing compared. */
export function formatChiSquare(chiSquare: number | null, degreesOfFreedom: number): string {
  if (chiSquare === null) return ABSENT;
  return `${formatChiSquareAlone(chiSquare)} / ${degreesOfFreedom}`;
}

/** A chi-square to two decimals, in powers of ten from a million up. */
export function formatChiSquareAlone(chiSquare: number | null): string {
  if (chiSquare === null) return ABSENT;
  return chiSquare >= 1e6 ? inPowersOfTen(chiSquare, 3) : formatFixed(chiSquare, 2);
}

/** Tension in sigma with its sign: `+0.4`, `−3.1`, `0.0`. */
export function formatTension(tension: number | null): string {
  if (tension === null) return ABSENT;
  if (Math.abs(tension) >= 1e6) return inPowersOfTen(tension);
  const text = formatFixed(tension, Math.abs(tension) < 99.95 ? 1 : 0);
  return tension > 0 && /[1-9]/.test(text) ? `+${text}` : text;
}

function logarithm(value: number): string {
  if (value === 0) return "0";
  if (Math.abs(value) < 0.005) return inPowersOrPlain(value);
  if (Math.abs(value) >= 1e6) return inPowersOfTen(value, 3);
  return formatFixed(value, Math.abs(value) >= 1e4 ? 0 : 2);
}

function inPowersOrPlain(value: number): string {
  if (Math.abs(value) < 5e-5) return inPowersOfTen(value, 1);
  return formatFixed(value, Math.abs(value) < 5e-4 ? 4 : 3);
}

function probability(value: number): string {
  if (value === 0 || value === 1) return String(value);
  if (value < 0.001) return inPowersOfTen(value);
  if (value > 0.999) return "> 0.999";
  return value < 0.99 ? value.toPrecision(2) : value.toFixed(3);
}
