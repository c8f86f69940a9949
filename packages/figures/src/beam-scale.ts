import { formatNumber, inPowersOfTen } from "./numbers";

/**
 * The categories of log10 Bayes factors. A category reaches from `from` to the next one's.
 *
 * Source: Kass & Raftery, J. Am. Stat. Assoc. 90 (1995) 773-795, section 3.2, the log10 table.
 */
export const KASS_RAFTERY = [
  { from: 0, words: "bare mention" },
  { from: 0.5, words: "substantial" },
  { from: 1, words: "strong" },
  { from: 2, words: "decisive" },
] as const;

/** Even where all lie close together every category is in sight, so that close looks close. */
const LEAST_REACH = 2.6;

/** Where log10 Bayes factors lie along a beam, in pixels from its leading end. */
export type BeamScale = {
  /** @param log10BayesFactor against the leader; null (likelihood zero) lies at the far end */
  at(log10BayesFactor: number | null): number;
  /** Where the leader hangs: 0 unless the no-model evidence is higher than the leader's. */
  leader: number;
  /** Last point that is to scale; beyond it hangs only what has no likelihood. */
  end: number;
  /** The largest |log10 B| on the scale. */
  reach: number;
};

/**
 * A scale that compresses toward the far end: the distance from the leader is ln(1 + |b|), linear
 * near 0 and logarithmic far out, so that 0.3 and 300 fit on one beam.
 *
 * @param values log10 Bayes factors against the leader, usually <= 0; null for a likelihood of zero
 * @param lengthPx the beam's length
 */
export function beamScale(values: readonly (number | null)[], lengthPx: number): BeamScale {
  const finite = values.filter((value) => value !== null);
  const reach = Math.max(LEAST_REACH, ...finite.map((value) => -value * 1.04));
  const ahead = Math.max(0, ...finite);
  const endZone = finite.length < values.length ? Math.min(40, lengthPx * 0.12) : 0;
  const end = lengthPx - endZone;
  const [near, far] = [stretch(ahead), stretch(-reach)];
  const at = (value: number | null) =>
    value === null ? lengthPx : ((stretch(value) - near) / (far - near)) * end;
  return { at, leader: at(0), end, reach };
}

/** A graduation: those of the published categories always, others where there is room. */
export type Tick = { value: number; text: string; category: boolean };

/** Candidates for graduations, the more important first. */
export function tickCandidates(reach: number): Tick[] {
  const values = [0, 2, 1, 0.5];
  for (let decade = 10; decade <= reach && values.length < 400; decade *= 10) values.push(decade);
  for (let decade = 1; decade <= reach && decade < 1000; decade *= 10) {
    values.push(5 * decade);
    if (decade > 1) values.push(2 * decade);
  }
  return values
    .filter((value) => value <= reach)
    .map((value) => ({
      value: value === 0 ? 0 : -value,
      text: value >= 1e5 ? inPowersOfTen(-value, 1) : formatNumber(-value),
      category: value <= 2,
    }));
}

function stretch(log10BayesFactor: number): number {
  return -Math.sign(log10BayesFactor) * Math.log1p(Math.abs(log10BayesFactor));
}
