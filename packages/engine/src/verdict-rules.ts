import type { Campaign } from "@weighhouse/campaign/document";
import type { VerdictWord } from "@weighhouse/campaign/standings";
import { cdf, upperTail, within, type Distribution } from "./distribution/distribution";
import { wrapped } from "./scoring-space";

export type Rule = Campaign["rule"];

const PASS_P = 0.05;
const FAIL_P = 0.0027;
const CERTAIN_FAIL_P = 5.7e-7;
const OWN_FAIL_P = 0.01;
const LN_SQRT_10 = Math.LN10 / 2;
const CALLED = 0.8;
const NOT_CALLED = 0.2;

/** How the true value lies to an interval: the three add up to 1. */
export interface Places {
  inside: number;
  above: number;
  below: number;
}

/**
 * Where the true value lies, in probability. On a circle the true value is taken once, at its
 * distance from the interval's middle in (-period / 2, period / 2]; upper is lower + width.
 */
export function placesOf(
  trueValue: Distribution,
  { lower, upper }: { lower: number; upper: number },
  { value, period }: { value: number; period: number },
): Places {
  let shift = 0;
  if (period > 0) {
    const middle = (lower + upper) / 2;
    shift = value - middle - wrapped(value - middle, period);
  }
  return {
    inside: within(trueValue, lower + shift, upper + shift),
    above: upper === Infinity ? 0 : upperTail(trueValue, upper + shift),
    below: lower === -Infinity ? 0 : cdf(trueValue, lower + shift),
  };
}

/**
 * Against an interval of positive width: JCGM 106's guarded acceptance and rejection (section 7).
 *
 * @param ownP the prediction's own chi-square p where its tolerance is normal; null where there is
 *   none, or the tolerance is another
 * @param referenceShare what the reference alone gives the interval, where there are limits only
 */
export function intervalWord(
  { inside, above, below }: Places,
  rule: Rule,
  { ownP, referenceShare }: { ownP: number | null; referenceShare: number | null },
): VerdictWord {
  if (inside >= rule.pass && (referenceShare === null || referenceShare < rule.pass)) return "pass";
  const beyond = Math.max(above, below);
  const fails =
    ownP === null ? beyond >= 1 - rule.fail / 5 : beyond >= 1 - rule.fail && ownP < OWN_FAIL_P;
  return fails ? "fail" : "undecided";
}

/** A curve, or an exact prediction: its p, and ln of its Bayes factor against the reference. */
export function exactWord(p: number | null, lnB: number): VerdictWord {
  if (p === null) {
    if (lnB >= Math.LN10) return "pass";
    return lnB <= -Math.LN10 ? "fail" : "undecided";
  }
  if (p >= PASS_P && lnB >= LN_SQRT_10) return "pass";
  if ((p < FAIL_P && lnB <= -LN_SQRT_10) || p < CERTAIN_FAIL_P) return "fail";
  return "undecided";
}

/**
 * P(what was called | reports): an event is called by a probability of at least 0.8, or at most 0.2.
 *
 * @param occurred P(it occurred | reports) with prior 1/2
 * @returns null where nothing is called
 */
export function calledProbability(probability: number, occurred: number): number | null {
  if (probability > NOT_CALLED && probability < CALLED) return null;
  return probability >= CALLED ? occurred : 1 - occurred;
}

/** @param lnB of the event's reports, against 1/2 */
export function eventWord(
  probability: number,
  rule: Rule,
  { occurred, lnB }: { occurred: number; lnB: number },
): VerdictWord {
  const called = calledProbability(probability, occurred);
  if (called === null) return "undecided";
  if (called >= rule.pass) return "pass";
  return called <= rule.fail && lnB <= -LN_SQRT_10 ? "fail" : "undecided";
}

/** Distance beyond the nearest hard bound, in u: negative below, 0 inside. */
export function tensionOfBounds(
  { lower, upper }: { lower: number; upper: number },
  { value, sd, period }: { value: number; sd: number; period: number },
): number {
  if (period > 0) {
    const distance = wrapped(value - (lower + upper) / 2, period);
    const beyond = Math.max(0, Math.abs(distance) - (upper - lower) / 2);
    return beyond === 0 ? 0 : (Math.sign(distance) * beyond) / sd;
  }
  if (value > upper) return (value - upper) / sd;
  return value < lower ? (value - lower) / sd : 0;
}
