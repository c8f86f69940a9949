import type { EngineState } from "./state";

export interface EvidencePoint {
  /** A hypothesis's key, `noneOfThese` (where its weight is above 0), or `noModel`. */
  hypothesis: string;
  /** Natural log of the evidence; null where the likelihood is zero. */
  lnEvidence: number | null;
}

/** One point of the timeline: every hypothesis in the document's order, then noneOfThese, then noModel. */
export function evidencesOf(_state: EngineState): EvidencePoint[] {
  throw new Error("being built");
}
