import type { Problem } from "@weighhouse/campaign/problem";
import { evidencesOf } from "@weighhouse/engine/evidences";
import { addMeasurements, createState } from "@weighhouse/engine/state";
import type { EngineState } from "@weighhouse/engine/state";
import { readDocument } from "@weighhouse/store/read-document";
import type { Store } from "@weighhouse/store/open-store";
import { readPosted } from "@weighhouse/store/scoring-input";
import type { Transaction } from "@weighhouse/store/scoring-input";
import type { TimelineStep } from "@weighhouse/store/standings";

export type Advanced = { steps: TimelineStep[] } & (
  { state: EngineState; problems: null } | { state: null; problems: Problem[] }
);

/**
 * Brings the engine's state through transactions, noting where each left the hypotheses.
 *
 * Measurements are added to the state; after anything else, and where adding is refused, the state
 * is made anew from the document, but not before somebody needs it.
 */
export async function advance(
  store: Store,
  campaign: string,
  from: { state: EngineState | null; transactions: Transaction[] },
): Promise<Advanced> {
  const { transactions } = from;
  let state = from.state;
  let problems: Problem[] = [];
  const steps: TimelineStep[] = [];
  for (const [index, transaction] of transactions.entries()) {
    state = transaction.onlyMeasurements ? await added(store, campaign, state, transaction) : null;
    const last = index === transactions.length - 1;
    if (state === null && (last || transaction.movedBy !== null)) {
      const { document } = await readDocument(store, campaign, transaction.size);
      const made = createState(document);
      state = made.ok ? made.value : null;
      problems = made.ok ? [] : made.problems;
    }
    if (state !== null && transaction.movedBy !== null) {
      const { size, at, movedBy } = transaction;
      steps.push({ size, at, movedBy, points: evidencesOf(state) });
    }
  }
  return state === null ? { steps, state, problems } : { steps, state, problems: null };
}

async function added(
  store: Store,
  campaign: string,
  state: EngineState | null,
  { begin, size }: Transaction,
): Promise<EngineState | null> {
  if (state === null) return null;
  const result = addMeasurements(state, await readPosted(store, { campaign, begin, size }));
  return result.ok ? result.value : null;
}
