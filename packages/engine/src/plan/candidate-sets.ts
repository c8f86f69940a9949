import { candidateMeasurement } from "@weighhouse/campaign/candidates";
import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { Plan } from "@weighhouse/campaign/plan";
import { toNatural } from "../scoring-space";
import { evidenceRatio } from "./evidence-with";
import { jointGain, type Joint } from "./joint-gain";
import { relevantPart } from "./relevant-part";
import type { Today, Weighed } from "./weighed";

const LARGEST_SET = 5;

/**
 * Sets of two to five candidates, built greedily: each adds the candidate with which the set tells
 * most, per cost where every candidate has one. Readings of a set are jointly normal under each
 * hypothesis, correlated through what they share (a predictive that isn't normal is taken as one
 * of the same mean and sd); outcomes of events and counts are independent given a hypothesis. A
 * candidate that may not be got counts in all ways in which the set may turn out.
 */
export function greedySets(
  document: CampaignDocument,
  weighed: readonly Weighed[],
  today: Today,
): Plan["sets"] {
  const costs = weighed.every(({ candidate }) => candidate.cost !== null);
  const correlations = correlationsOf(document, today);
  const gains = new Map<string, number>();
  let chosen: Weighed[] = [];
  const sets: Plan["sets"] = [];
  while (chosen.length < Math.min(LARGEST_SET, weighed.length)) {
    let best: { set: Weighed[]; gain: number; worth: number } | null = null;
    for (const one of weighed) {
      if (chosen.includes(one)) continue;
      const set = [...chosen, one];
      const gain = expectedGain(set, { today, correlations, gains });
      const worth = costs ? gain / costOf(set) : gain;
      if (best === null || worth > best.worth) best = { set, gain, worth };
    }
    chosen = best!.set;
    if (chosen.length < 2) continue;
    sets.push({
      candidates: chosen.map(({ candidate }) => candidate.key),
      informationGainBits: best!.gain,
      gainPerCost: costs ? best!.gain / costOf(chosen) : null,
    });
  }
  return sets;
}

function costOf(set: readonly Weighed[]): number {
  return set.reduce((sum, { candidate }) => sum + candidate.cost!, 0);
}

interface Context {
  today: Today;
  correlations: Correlations;
  /** Of sets that were got whole, by their keys. */
  gains: Map<string, number>;
}

/** Over every part of the set that may be got, by its chance. */
function expectedGain(set: readonly Weighed[], context: Context): number {
  let expected = 0;
  for (let got = 1; got < 2 ** set.length; got += 1) {
    let chance = 1;
    const part: Weighed[] = [];
    set.forEach((one, i) => {
      const isGot = ((got >> i) & 1) === 1;
      chance *= isGot ? one.candidate.chance : 1 - one.candidate.chance;
      if (isGot) part.push(one);
    });
    if (chance > 0) expected += chance * gainOf(part, context);
  }
  return expected;
}

function gainOf(part: readonly Weighed[], { today, correlations, gains }: Context): number {
  const [only] = part;
  if (part.length === 1) return only!.gain / only!.candidate.chance;
  const key = part.map(({ candidate }) => candidate.key).join(" ");
  const there = gains.get(key);
  if (there !== undefined) return there;
  const joints: Joint[] = [...today.posteriors].flatMap(([hypothesis, posterior]) => {
    const joint = jointOf(part, hypothesis, correlations);
    return joint === null ? [] : [{ posterior, ...joint }];
  });
  const gain = jointGain(joints);
  gains.set(key, gain);
  return gain;
}

/** A hypothesis's joint distribution of the readings; null where it is impossible. */
function jointOf(
  part: readonly Weighed[],
  hypothesis: string,
  correlations: Correlations,
): Omit<Joint, "posterior"> | null {
  const values = part.filter(({ predictives }) => predictives !== null);
  const mean: number[] = [];
  const spread: number[] = [];
  for (const { candidate, predictives } of values) {
    const predictive = predictives!.get(hypothesis);
    if (predictive === undefined) return null;
    mean.push(predictive.mean);
    spread.push(Math.hypot(predictive.sd, candidate.sd!));
  }
  const covariance = values.map((one, i) =>
    values.map((other, j) => {
      if (i === j) return spread[i]! ** 2;
      return correlations(one, other, hypothesis) * spread[i]! * spread[j]!;
    }),
  );
  const outcomes = part.flatMap((one) => {
    const own = one.outcomes?.get(hypothesis);
    return own === undefined ? [] : [own];
  });
  return { mean, covariance, outcomes };
}

/** The correlation of two readings, their own noises included. */
type Correlations = (a: Weighed, b: Weighed, hypothesis: string) => number;

/**
 * From the mixed second difference of ln p(y_a, y_b) over steps of one sd each, which for normals is
 * minus the precision's off-diagonal times both sds, q: rho = -2 q / (1 + sqrt(1 + 4 q^2)).
 */
function correlationsOf(document: CampaignDocument, { posteriors }: Today): Correlations {
  const known = new Map<string, Map<string, number>>();
  return (a, b, hypothesis) => {
    const [first, second] = a.candidate.key < b.candidate.key ? [a, b] : [b, a];
    const key = `${first.candidate.key} ${second.candidate.key}`;
    let pair = known.get(key);
    if (pair === undefined) {
      pair = pairCorrelations(document, [first, second], [...posteriors.keys()]);
      known.set(key, pair);
    }
    return pair.get(hypothesis) ?? 0;
  };
}

function pairCorrelations(
  document: CampaignDocument,
  pair: readonly [Weighed, Weighed],
  keys: readonly string[],
): Map<string, number> {
  const measurands = pair.map(({ candidate }) => candidate.measurand);
  const errors = pair.flatMap(({ candidate }) => candidate.shared.map(({ error }) => error));
  const part = relevantPart(document, measurands, errors);
  const ratio = evidenceRatio(part);
  const correlations = new Map<string, number>();
  for (const key of keys) {
    const places = pair.map(({ candidate, predictives }) => {
      const predictive = predictives!.get(key);
      return predictive === undefined
        ? null
        : { mean: predictive.mean, spread: Math.hypot(predictive.sd, candidate.sd!) };
    });
    const [a, b] = [places[0] ?? null, places[1] ?? null];
    if (a === null || b === null) continue;
    const ln = (signA: number, signB: number) =>
      ratio(
        [
          reading(document, pair[0], a.mean + signA * a.spread),
          reading(document, pair[1], b.mean + signB * b.spread),
        ],
        key,
      ) ?? Number.NaN;
    const mixed = (ln(1, 1) - ln(1, -1) - ln(-1, 1) + ln(-1, -1)) / 4;
    const q = -mixed;
    const rho = (-2 * q) / (1 + Math.sqrt(1 + 4 * q * q));
    if (Number.isFinite(rho)) correlations.set(key, Math.min(Math.max(rho, -0.999999), 0.999999));
  }
  return correlations;
}

function reading(document: CampaignDocument, { candidate }: Weighed, y: number): Measurement {
  const measurand = document.measurands.find(({ key }) => key === candidate.measurand)!;
  const observable = document.observables.find(({ key }) => key === measurand.observable)!;
  const scale = observable.scale as "linear" | "log10" | "magnitude" | "cyclic";
  return candidateMeasurement(candidate, { value: toNatural(y, scale), scale });
}
