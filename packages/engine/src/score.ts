import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Result } from "@weighhouse/campaign/problem";
import type { Standings } from "@weighhouse/campaign/standings";
import type { ScoreOptions } from "./score-options";
import { createState, standingsOf } from "./state";

/** Scores a whole campaign; what isn't supported yet is refused by name, never scored wrongly. */
export function scoreCampaign(
  document: CampaignDocument,
  options: ScoreOptions = {},
): Result<Standings> {
  const state = createState(document);
  return state.ok ? { ok: true, value: standingsOf(state.value, options) } : state;
}

export type { ScoreOptions } from "./score-options";
