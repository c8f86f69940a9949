import { logSumExp } from "@weighhouse/numerics/log-sum-exp";
import type { Pair } from "@weighhouse/campaign/standings";
import { enteredCounts } from "./entered";
import { evidence } from "./evidence";
import type { HypothesisScore } from "./hypothesis-scores";
import type { Workspace } from "./workspace";

/** Highest evidence first, ties by key. */
export function ranked<Score extends Pick<HypothesisScore, "key" | "lnEvidence">>(
  scores: readonly Score[],
): Score[] {
  return [...scores].sort((a, b) => {
    if (a.lnEvidence !== b.lnEvidence) return a.lnEvidence > b.lnEvidence ? -1 : 1;
    return a.key < b.key ? -1 : 1;
  });
}

/** Posterior probabilities, proportional to share x Z; all 0 where every likelihood is zero. */
export function posteriors(
  scores: readonly Pick<HypothesisScore, "share" | "lnEvidence">[],
): number[] {
  const logs = scores.map(({ share, lnEvidence }) => Math.log(share) + lnEvidence);
  const total = logSumExp(logs);
  return logs.map((log) => (total === -Infinity ? 0 : Math.exp(log - total)));
}

/** log10 of Z_a / Z_b; null where either likelihood is zero. */
export function log10BayesFactor(lnA: number, lnB: number): number | null {
  return Number.isFinite(lnA) && Number.isFinite(lnB) ? (lnA - lnB) / Math.LN10 : null;
}

/** Every unordered pair once, the higher rank first. */
export function pairsOf(workspace: Workspace, inRank: readonly HypothesisScore[]): Pair[] {
  const pairs: Pair[] = [];
  inRank.forEach((a, i) => {
    for (const b of inRank.slice(i + 1)) {
      pairs.push({
        a: a.key,
        b: b.key,
        log10BayesFactor: log10BayesFactor(a.lnEvidence, b.lnEvidence),
        commonGround: commonGround(workspace, a, b),
      });
    }
  });
  return pairs;
}

/** Both evidences over the measurements of the measurands that both predict. */
function commonGround(
  workspace: Workspace,
  a: HypothesisScore,
  b: HypothesisScore,
): Pair["commonGround"] {
  let measurements = 0;
  const shared = a.spoken.map((role, m) => role !== null && b.spoken[m] !== null);
  enteredCounts(workspace).forEach((count, m) => {
    if (shared[m]) measurements += count;
  });
  if (measurements === 0) return { measurements, log10BayesFactor: null };
  const only = ({ spoken }: HypothesisScore) => spoken.map((role, m) => (shared[m] ? role : null));
  const lnA = evidence(workspace, only(a)).ln;
  const lnB = evidence(workspace, only(b)).ln;
  return { measurements, log10BayesFactor: log10BayesFactor(lnA, lnB) };
}
