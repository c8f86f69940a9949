import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Result } from "@weighhouse/campaign/problem";
import type { Standings } from "@weighhouse/campaign/standings";
import { createState, standingsOf } from "./state";

export interface ScoreOptions {
  /** Predictions filed after data count as the others do. */
  includeAfter?: boolean;
  /** Where in the ledger the document was folded; null for a file. */
  asOf?: Standings["asOf"];
}

/** Scores a whole campaign; what isn't supported yet is refused by name, never scored wrongly. */
export function scoreCampaign(
  document: CampaignDocument,
  options: ScoreOptions = {},
): Result<Standings> {
  const state = createState(document);
  return state.ok ? { ok: true, value: standingsOf(state.value, options) } : state;
}
