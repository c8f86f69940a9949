import type { Problem } from "@weighhouse/campaign/problem";
import { evidencesOf } from "@weighhouse/engine/evidences";
import {
  addMeasurements,
  createState,
  remakeMeasurands,
  reviseMeasurements,
} from "@weighhouse/engine/state";
import type { EngineState } from "@weighhouse/engine/state";
import { readDocument } from "@weighhouse/store/read-document";
import type { Store } from "@weighhouse/store/open-store";
import { readMeasurementsOf, readPosted, readRevised } from "@weighhouse/store/scoring-input";
import type { Transaction } from "@weighhouse/store/scoring-input";
import type { TimelineStep } from "@weighhouse/store/standings";

export type Advanced = { steps: TimelineStep[] } & (
  { state: EngineState; problems: null } | { state: null; problems: Problem[] }
);

/**
 * Brings the engine's state through transactions, noting where each left the hypotheses.
 *
 * Measurements are added to the state, corrected, set aside and withdrawn in it; after anything else
 * that is scored, and where that is refused, the state is made anew from the document, but not before
 * somebody needs it.
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
    state = state === null ? null : await stateAfter(store, campaign, { state, transaction });
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

const ENTRIES_AT_A_TIME = 20;

/** Some entries at a time: one transaction may post a million measurements. */
async function withPosted(
  store: Store,
  campaign: string,
  from: { state: EngineState; transaction: Transaction },
): Promise<EngineState | null> {
  const { begin, size } = from.transaction;
  let { state } = from;
  for (let first = begin; first < size; first += ENTRIES_AT_A_TIME) {
    const end = Math.min(first + ENTRIES_AT_A_TIME, size);
    const posted = await readPosted(store, { campaign, begin: first, size: end });
    const added = addMeasurements(state, posted);
    if (!added.ok) return null;
    state = added.value;
  }
  return state;
}

/** Null where it has to be made anew. */
async function stateAfter(
  store: Store,
  campaign: string,
  { state, transaction }: { state: EngineState; transaction: Transaction },
): Promise<EngineState | null> {
  const { change, begin, size } = transaction;
  if (change === "none") return state;
  if (change === "posted") return withPosted(store, campaign, { state, transaction });
  if (change === "document") return null;
  // To the last bit as from the document: standings mustn't hang on where a scorer went on from.
  const revisions = await readRevised(store, { campaign, begin, size });
  const revised = reviseMeasurements(state, revisions, "bytes");
  if (revised === null || !revised.ok) return null;
  const { worn } = revised.value;
  if (worn.length === 0) return revised.value.state;
  const left = await readMeasurementsOf(store, { campaign, measurands: worn, size });
  return remakeMeasurands(revised.value.state, worn, left);
}
