import { restoreState, serialiseState, standingsOf } from "@weighhouse/engine/state";
import type { EngineState } from "@weighhouse/engine/state";
import { ENGINE_VERSION, STATE_VERSION } from "@weighhouse/engine/version";
import type { Store } from "@weighhouse/store/open-store";
import { readState, saveScoring } from "@weighhouse/store/save-scoring";
import { readTransactions } from "@weighhouse/store/scoring-input";
import { advance } from "./advance";
import { tellingOf } from "./webhook-telling";

/** So many transactions are scored and kept at a time: a stop in a long history loses no more. */
const TRANSACTIONS_AT_A_TIME = 200;

type Position = { size: number; state: EngineState | null };

export type ScoreOptions = {
  /** Asks to leave off before the end. */
  stopping?: () => boolean;
  /** Where people reach this server: what webhooks are told leads there. */
  origin?: string;
};

/**
 * Scores a campaign up to its latest entry: takes the kept state of this engine, or none, through
 * the transactions since, and keeps standings (or why there are none), timeline and state, and what
 * webhooks are told of it.
 *
 * @returns false where `stopping` asked to leave off before the end
 */
export async function scoreCampaign(
  store: Store,
  campaign: string,
  { stopping = () => false, origin = "http://localhost:3000" }: ScoreOptions = {},
): Promise<boolean> {
  let position = await keptPosition(store, campaign);
  for (;;) {
    const transactions = await readTransactions(store, {
      campaign,
      after: position.size,
      limit: TRANSACTIONS_AT_A_TIME,
    });
    const last = transactions.at(-1);
    if (last === undefined) return true;
    const { size, treeHead } = last;
    const { state, problems, steps } = await advance(store, campaign, {
      state: position.state,
      transactions,
    });
    const standings = state === null ? null : standingsOf(state, { asOf: { size, treeHead } });
    const scoring = {
      campaign,
      size,
      engine: ENGINE_VERSION,
      outcome:
        standings === null
          ? { standings: null, problems: problems ?? [] }
          : { standings, problems: null },
      steps,
      stateVersion: STATE_VERSION,
      state: state === null ? null : serialiseState(state),
    };
    const telling = standings && tellingOf({ campaign, size, standings, origin });
    await saveScoring(store, scoring, telling);
    if (stopping()) return false;
    position = { size, state };
  }
}

async function keptPosition(store: Store, campaign: string): Promise<Position> {
  const kept = await readState(store, {
    campaign,
    engine: ENGINE_VERSION,
    stateVersion: STATE_VERSION,
  });
  if (kept === null) return { size: 0, state: null };
  if (kept.state === null) return { size: kept.size, state: null };
  const state = restoreState(kept.state);
  return state === null ? { size: 0, state } : { size: kept.size, state };
}
