import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { HypothesisStanding } from "@weighhouse/campaign/standings";
import type { StandingsChanges } from "@weighhouse/desk/standings-changes";

export function hypothesisName(document: CampaignDocument, key: string): string {
  if (key === "noneOfThese") return "None of these";
  return document.hypotheses.find((hypothesis) => hypothesis.key === key)?.title ?? key;
}

/** Verdicts whose word changes. */
export function verdictChanges({ verdicts }: StandingsChanges): StandingsChanges["verdicts"] {
  return verdicts.filter(({ before, after }) => before !== after);
}

export interface StandingChange {
  hypothesis: string;
  rank: { before: number | null; after: number | null };
  /** log10 B against the leader; null for a likelihood of zero, undefined where it has no row. */
  before: number | null | undefined;
  after: number | null | undefined;
}

/** Every hypothesis in the order it would have. */
export function standingsChanges({ before, after }: StandingsChanges): StandingChange[] {
  const earlier = new Map(before.hypotheses.map((each) => [each.key, each]));
  return after.hypotheses.map((standing) => changeOf(earlier.get(standing.key), standing));
}

function changeOf(
  before: HypothesisStanding | undefined,
  after: HypothesisStanding,
): StandingChange {
  return {
    hypothesis: after.key,
    rank: { before: before?.rank ?? null, after: after.rank },
    before: before?.log10BayesFactor,
    after: after.log10BayesFactor,
  };
}
