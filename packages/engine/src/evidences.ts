import { scoreHypothesis, scoreSilence } from "./hypothesis-scores";
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
  const scores = state.frame.hypotheses.map((one) => scoreHypothesis(workspace, one, context));
  const silence = scoreSilence(workspace);
  const points = silence.share > 0 ? [...scores, silence] : scores;
  return [...points, { ...silence, key: "noModel" }].map(({ key, lnEvidence }) => ({
    hypothesis: key,
    lnEvidence: Number.isFinite(lnEvidence) ? lnEvidence : null,
  }));
}
