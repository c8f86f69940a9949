import {
  candidateMeasurement,
  type Candidate,
  type Outcome,
} from "@weighhouse/campaign/candidates";
import type { CampaignDocument, Measurand, Observable } from "@weighhouse/campaign/document";
import { PLAN_FORMAT, type Plan } from "@weighhouse/campaign/plan";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import type { Standings } from "@weighhouse/campaign/standings";
import { scoreCampaign } from "../score";
import { toNatural, toScoringSpace } from "../scoring-space";
import { greedySets } from "./candidate-sets";
import { evidenceRatio, Unscorable } from "./evidence-with";
import {
  decisiveProbability,
  halfGainSd,
  informationGain,
  type Weighted,
} from "./information-gain";
import { outcomeDecisiveProbability, outcomeInformationGain } from "./outcome-gain";
import { outcomesOf } from "./outcomes";
import { predictivesOf, type LogPredictive, type Range } from "./predictive";
import { relevantPart } from "./relevant-part";
import type { Today, Weighed } from "./weighed";

export interface PlanOptions {
  /** Called before each candidate, and at last before the sets. */
  progress?: (done: number, total: number) => void;
}

/**
 * What to measure next (section 11): candidates by what they would tell which hypothesis it is.
 *
 * Predictives are ratios of evidences with and without a reading, so that they hold for every form
 * of measurement and hypothesis the engine scores.
 */
export function planOf(
  document: CampaignDocument,
  candidates: readonly Candidate[],
  { progress = () => undefined }: PlanOptions = {},
): Result<Plan> {
  const scored = scoreCampaign(document);
  if (!scored.ok) return scored;
  const today = todayOf(scored.value);
  const weighed: Weighed[] = [];
  const rows: Plan["candidates"] = [];
  const problems: Problem[] = [];
  candidates.forEach((candidate, i) => {
    progress(i, candidates.length + 1);
    try {
      const { row, weighed: one } = weigh(document, candidate, { today, standings: scored.value });
      rows.push(row);
      weighed.push(one);
    } catch (error) {
      if (!(error instanceof Unscorable)) throw error;
      for (const { code, found, allowed } of error.problems) {
        problems.push({ pointer: `/candidates/${i}`, code, found, allowed });
      }
    }
  });
  if (problems.length > 0) return { ok: false, problems };
  progress(candidates.length, candidates.length + 1);
  const sets = greedySets(document, weighed, today);
  const value: Plan = { format: PLAN_FORMAT, candidates: ordered(rows), sets };
  return { ok: true, value };
}

function todayOf({ hypotheses }: Standings): Today {
  const posteriors = new Map(
    hypotheses.filter(({ posterior }) => posterior > 0).map((one) => [one.key, one.posterior]),
  );
  const [first, second] = hypotheses;
  const log10B = second?.log10BayesFactor ?? null;
  if (first === undefined || second === undefined || log10B === null) {
    return { posteriors, top: null };
  }
  return { posteriors, top: { first: first.key, second: second.key, log10B: -log10B } };
}

interface Context {
  today: Today;
  standings: Standings;
}

type LogProbability = (outcome: Outcome, sd: number | null, hypothesis: string) => number | null;

type CandidateRow = Plan["candidates"][number];

function weigh(document: CampaignDocument, candidate: Candidate, context: Context) {
  const errors = candidate.shared.map(({ error }) => error);
  const part = relevantPart(document, [candidate.measurand], errors);
  const measurand = document.measurands.find(({ key }) => key === candidate.measurand)!;
  const observable = document.observables.find(({ key }) => key === measurand.observable)!;
  const ratio = evidenceRatio(part);
  const logProbability: LogProbability = (outcome, sd, hypothesis) =>
    ratio([candidateMeasurement({ ...candidate, sd }, outcome)], hypothesis);
  const { scale } = observable;
  if (scale === "event" || scale === "count") {
    return weighOutcomes(candidate, { scale, logProbability, ...context });
  }
  const logPredictive: LogPredictive = (y, sd, hypothesis) =>
    logProbability({ value: toNatural(y, scale), scale }, sd, hypothesis);
  const range = rangeOf(measurand, observable, context.standings);
  return weighValue(candidate, { logPredictive, range, ...context });
}

function weighValue(
  candidate: Candidate,
  { logPredictive, range, today }: Context & { logPredictive: LogPredictive; range: Range },
): { row: CandidateRow; weighed: Weighed } {
  const sd = candidate.sd!;
  const keys = [...today.posteriors.keys()];
  const predictives = predictivesOf(logPredictive, keys, { sd, range });
  const mixture: Weighted[] = [];
  for (const [key, posterior] of today.posteriors) {
    const predictive = predictives.get(key);
    if (predictive !== undefined) mixture.push({ posterior, predictive });
  }
  const gain = candidate.chance * informationGain(mixture, sd);
  const { top } = today;
  const [first, second] = [predictives.get(top?.first ?? ""), predictives.get(top?.second ?? "")];
  const decisive =
    top === null || first === undefined || second === undefined
      ? null
      : decisiveProbability(mixture, { first, second, log10B: top.log10B, sd });
  const row: CandidateRow = {
    key: candidate.key,
    informationGainBits: gain,
    gainPerCost: candidate.cost === null ? null : gain / candidate.cost,
    decisiveProbability: decisive,
    halfGainSd: halfGainSd(mixture),
    predictive: keys.map((hypothesis) => {
      const predictive = predictives.get(hypothesis);
      return { hypothesis, mean: predictive?.mean ?? null, sd: predictive?.sd ?? null };
    }),
  };
  return { row, weighed: { candidate, gain, predictives, outcomes: null } };
}

function weighOutcomes(
  candidate: Candidate,
  {
    scale,
    logProbability,
    today,
  }: Context & {
    scale: "event" | "count";
    logProbability: LogProbability;
  },
): { row: CandidateRow; weighed: Weighed } {
  const keys = [...today.posteriors.keys()];
  const { probabilities, predictive } = outcomesOf(candidate, scale, {
    keys,
    logProbability: (outcome, hypothesis) => logProbability(outcome, null, hypothesis),
  });
  const mixture = [...today.posteriors].map(([key, posterior]) => ({
    posterior,
    probabilities: probabilities.get(key)!,
  }));
  const gain = candidate.chance * outcomeInformationGain(mixture);
  const { top } = today;
  const [first, second] = [
    probabilities.get(top?.first ?? ""),
    probabilities.get(top?.second ?? ""),
  ];
  const decisive =
    top === null || first === undefined || second === undefined
      ? null
      : outcomeDecisiveProbability(mixture, { first, second, log10B: top.log10B });
  const row: CandidateRow = {
    key: candidate.key,
    informationGainBits: gain,
    gainPerCost: candidate.cost === null ? null : gain / candidate.cost,
    decisiveProbability: decisive,
    halfGainSd: null,
    predictive: keys.map((hypothesis) => ({ hypothesis, ...predictive.get(hypothesis)! })),
  };
  return { row, weighed: { candidate, gain, predictives: null, outcomes: probabilities } };
}

/** A first guess of where readings fall; predictives are sought from there. */
function rangeOf(measurand: Measurand, { scale, period }: Observable, standings: Standings): Range {
  if (period !== null) return { middle: period / 2, scale: period / 16, period };
  const { reference, key } = measurand;
  const combined = standings.measurands.find((one) => one.key === key)?.combined ?? null;
  const measured = combined === null ? null : toScoringSpace(combined.value, scale);
  switch (reference?.family) {
    case "uniform": {
      const lower = toScoringSpace(reference.lower, scale);
      const upper = toScoringSpace(reference.upper, scale);
      return { middle: measured ?? (lower + upper) / 2, scale: (upper - lower) / 8 };
    }
    case "normal":
      return { middle: measured ?? toScoringSpace(reference.mean, scale), scale: reference.sd };
    case "polynomial":
      return { middle: toScoringSpace(reference.centre, scale), scale: reference.sd };
    default:
      return { middle: measured ?? 0, scale: 1 };
  }
}

/** Highest gain per cost first; without costs by gain; ties by key. */
function ordered(rows: CandidateRow[]): CandidateRow[] {
  const costs = rows.every(({ gainPerCost }) => gainPerCost !== null);
  const worth = (row: CandidateRow) => (costs ? row.gainPerCost! : row.informationGainBits);
  return rows.sort((a, b) => worth(b) - worth(a) || (a.key < b.key ? -1 : 1));
}
