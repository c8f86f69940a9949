import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Result } from "@weighhouse/campaign/problem";
import type { Standings } from "@weighhouse/campaign/standings";
import { EngineError } from "./engine-error";
import type { ScoreOptions } from "./score-options";
import { createState, standingsOf } from "./state";

/** Scores a whole campaign; what isn't supported yet is refused by name, never scored wrongly. */
export function scoreCampaign(
  document: CampaignDocument,
  options: ScoreOptions = {},
): Result<Standings> {
  const state = createState(document);
  if (!state.ok) return state;
  try {
    return { ok: true, value: standingsOf(state.value, options) };
  } catch (error) {
    if (error instanceof EngineError) return { ok: false, problems: error.problems };
    throw error;
  }
}

export type { ScoreOptions } from "./score-options";
