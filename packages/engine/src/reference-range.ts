import { gammaFromMoments } from "@weighhouse/numerics/gamma-distribution";
import { quantile, within, type Distribution } from "./distribution/distribution";
import type { Frame, PolynomialRole, Role } from "./frame";
import { wrapped } from "./scoring-space";

/** Beyond this many sd of a reference's mean a value lies outside it. */
const OUTSIDE_SD = 4;

/** Where a reference lies, in scoring space: its bounds, or 4 sd about its mean; infinite without. */
export function referenceRange(frame: Frame, measurand: number): { lower: number; upper: number } {
  const reference = frame.measurands[measurand]!.roles[0]!;
  switch (reference.kind) {
    case "uniform":
      return { lower: reference.lower, upper: reference.upper };
    case "normal":
      return about(reference.mean, reference.sd);
    case "polynomial":
      return about(reference.centre, reference.sd * Math.sqrt(reference.degree + 1));
    case "rate":
      return rangeOfRate(reference);
    default:
      return { lower: -Infinity, upper: Infinity };
  }
}

function about(mean: number, sd: number) {
  return { lower: mean - OUTSIDE_SD * sd, upper: mean + OUTSIDE_SD * sd };
}

function rangeOfRate(reference: Extract<Role, { kind: "rate" }>) {
  if (reference.family === "uniform") return { lower: reference.lower, upper: reference.upper };
  if (reference.family === "exact") return { lower: reference.rate, upper: reference.rate };
  const { lower, upper } = about(reference.mean, reference.sd);
  return { lower: Math.max(0, lower), upper };
}

/**
 * Whether a value in scoring space lies outside a reference's range, or beyond 4 sd.
 *
 * @param conditions of a curve's measurement: a polynomial's sd is taken there, else where it is
 *   largest, at an end of its range
 */
export function isOutsideReference(
  frame: Frame,
  measurand: number,
  { y, conditions = [] }: { y: number; conditions?: readonly number[] },
): boolean {
  const { roles, period } = frame.measurands[measurand]!;
  const reference = roles[0]!;
  const x = reference.kind === "polynomial" ? conditions[reference.condition] : undefined;
  if (reference.kind === "polynomial" && x !== undefined) {
    return Math.abs(y - reference.centre) > OUTSIDE_SD * polynomialSd(reference, x);
  }
  const { lower, upper } = referenceRange(frame, measurand);
  if (period === 0) return y < lower || y > upper;
  return Math.abs(wrapped(y - (lower + upper) / 2, period)) > (upper - lower) / 2;
}

/** sqrt(sum of P_n(x)^2) sd, Legendre polynomials over the range mapped to [-1, 1]. */
function polynomialSd({ lower, upper, degree, sd }: PolynomialRole, condition: number): number {
  const x = (2 * condition - lower - upper) / (upper - lower);
  let [before, now] = [1, x];
  let sum = 1;
  for (let n = 1; n <= degree; n += 1) {
    sum += now * now;
    [before, now] = [now, ((2 * n + 1) * x * now - n * before) / (n + 1)];
  }
  return sd * Math.sqrt(sum);
}

/** The true value under a reference, in scoring space; null for events and polynomials. */
function referenceDistribution(frame: Frame, measurand: number): Distribution | null {
  const reference = frame.measurands[measurand]!.roles[0]!;
  switch (reference.kind) {
    case "normal":
      return { kind: "normal", mean: reference.mean, sd: reference.sd };
    case "uniform":
      return { kind: "uniform", lower: reference.lower, upper: reference.upper };
    case "rate":
      if (reference.family === "uniform") {
        return { kind: "uniform", lower: reference.lower, upper: reference.upper };
      }
      return reference.family === "gamma"
        ? { kind: "gamma", ...gammaFromMoments(reference.mean, reference.sd) }
        : null;
    default:
      return null;
  }
}

/**
 * The share of the reference's probability between two bounds, in scoring space; 0 where it is no
 * distribution of one value.
 */
export function shareOfReference(
  frame: Frame,
  measurand: number,
  { lower, upper }: { lower: number; upper: number },
): number {
  const reference = referenceDistribution(frame, measurand);
  if (reference === null || !(upper > lower)) return 0;
  const { period } = frame.measurands[measurand]!;
  if (period === 0) return Math.min(1, within(reference, lower, upper));
  if (upper - lower >= period) return 1;
  // On a circle the bounds are looked at where they come near the reference, and a turn to each side.
  const middle = (lower + upper) / 2;
  const near = quantile(reference, 0.5);
  const shift = near + wrapped(middle - near, period) - middle;
  let share = 0;
  for (const turn of [-period, 0, period]) {
    share += within(reference, lower + shift + turn, upper + shift + turn);
  }
  return Math.min(1, share);
}
