import { lnEvidenceOf, type Said } from "./hypothesis-scores";
import { openWorkspace } from "./open-workspace";
import type { ScoreOptions } from "./score-options";
import type { EngineState } from "./engine-state";

export interface EvidencePoint {
  /** A hypothesis's key, `noneOfThese` (where its weight is above 0), or `noModel`. */
  hypothesis: string;
  /** Natural log of the evidence; null where the likelihood is zero. */
  lnEvidence: number | null;
}

/** One point of the timeline: every hypothesis in the document's order, then noneOfThese, then noModel. */
export function evidencesOf(
  state: EngineState,
  { includeAfter = false }: Pick<ScoreOptions, "includeAfter"> = {},
): EvidencePoint[] {
  const workspace = openWorkspace(state);
  const context = { dates: state.tally.dates, includeAfter };
  const point = (hypothesis: string, said: Said): EvidencePoint => {
    const lnEvidence = lnEvidenceOf(workspace, said, context);
    return { hypothesis, lnEvidence: Number.isFinite(lnEvidence) ? lnEvidence : null };
  };
  const points = state.frame.hypotheses.map((one) => point(one.key, one));
  if (state.frame.document.campaign.noneOfThese.weight > 0) points.push(point("noneOfThese", null));
  return [...points, point("noModel", null)];
}
