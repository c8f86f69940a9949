import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { Sensitivity } from "@weighhouse/campaign/sensitivity";
import { log10BayesFactor, posteriors, ranked } from "../comparison";
import type { EngineState } from "../engine-state";
import { EngineError } from "../engine-error";
import { scoreBriefly } from "../hypothesis-scores";
import { openWorkspace } from "../open-workspace";
import { createState } from "../state";
import { takeUnmovedBlocks } from "../unmoved-blocks";
import type { Workspace } from "../workspace";

/** Every hypothesis in rank order; null where the campaign can't be scored. */
export type ScoreChanged = (document: CampaignDocument) => Sensitivity["hypotheses"] | null;

/**
 * Scores changed campaigns, without the verdicts that nothing here asks for. What a change leaves as
 * it is isn't worked out again.
 */
export function changedScores(document: CampaignDocument): ScoreChanged {
  const made = createState(document);
  const base = made.ok ? openWorkspace(made.value) : null;
  if (made.ok && base !== null) hypothesesOf(base, made.value);
  return (changed) => {
    const state = createState(changed);
    if (!state.ok) return null;
    const workspace = openWorkspace(state.value);
    if (base !== null && sharesErrors(document, changed)) {
      takeUnmovedBlocks(workspace, base, touchedBy(document, changed));
    }
    try {
      return hypothesesOf(workspace, state.value);
    } catch (error) {
      if (error instanceof EngineError) return null;
      throw error;
    }
  };
}

function hypothesesOf(workspace: Workspace, { frame, tally }: EngineState) {
  const context = { dates: tally.dates, includeAfter: false };
  const scores = [...frame.hypotheses, null].map((one) => scoreBriefly(workspace, one, context));
  const counted = scores.filter(({ key, share }) => key !== "noneOfThese" || share > 0);
  const inRank = ranked(counted);
  const chances = posteriors(inRank);
  return inRank.map(({ key, lnEvidence, fit }, i) => ({
    key,
    rank: i + 1,
    log10BayesFactor: log10BayesFactor(lnEvidence, inRank[0]!.lnEvidence),
    posterior: chances[i]!,
    chiSquare: fit !== null && Number.isFinite(fit.chiSquare) ? fit.chiSquare : null,
  }));
}

function sharesErrors(a: CampaignDocument, b: CampaignDocument): boolean {
  return a.sharedErrors === b.sharedErrors && a.correlations === b.correlations;
}

/** Places of the measurands whose measurements aren't the same ones. */
function touchedBy(a: CampaignDocument, b: CampaignDocument): Set<number> {
  const [before, after] = [byMeasurand(a.measurements), byMeasurand(b.measurements)];
  const touched = new Set<number>();
  a.measurands.forEach(({ key }, place) => {
    const [own, now] = [before.get(key) ?? [], after.get(key) ?? []];
    if (own.length !== now.length || own.some((one, i) => one !== now[i])) touched.add(place);
  });
  return touched;
}

function byMeasurand(measurements: readonly Measurement[]): Map<string, Measurement[]> {
  const lists = new Map<string, Measurement[]>();
  for (const one of measurements) {
    const there = lists.get(one.measurand);
    if (there === undefined) lists.set(one.measurand, [one]);
    else there.push(one);
  }
  return lists;
}
