import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { EntryKind } from "@weighhouse/campaign/entries";
import { CampaignFold } from "@weighhouse/campaign/fold";
import {
  ledgerChangeOf,
  movingKinds,
  type LedgerChange,
} from "@weighhouse/campaign/ledger-changes";
import { evidencesOf, type EvidencePoint } from "./evidences";
import {
  addMeasurements,
  createState,
  remakeMeasurands,
  reviseMeasurements,
  type EngineState,
  type Revision,
} from "./state";

export interface TimelineStep {
  /** Of the ledger after the transaction. */
  size: number;
  /** Time of its last entry. */
  at: string;
  /** The first of its entries that changed measurements or hypotheses, and the measurements it touched. */
  movedBy: { seq: number; kind: EntryKind; facilities: string[]; measurements: number };
  /** As `evidencesOf` has them; null where the document of that size can't be scored. */
  points: EvidencePoint[] | null;
}

/**
 * Each hypothesis's ln Z after each transaction that changed the measurements or the hypotheses
 * (section 9 of the statistics), by the incremental state: O(k^2) of scoring for a measurement that
 * comes, changes or goes. What else changes the document makes the state anew.
 *
 * @param transactions the ledger's entries from the first, in order, each transaction's together
 * @throws {CampaignError} where the entries can't be folded
 * @throws {EngineError} `refused`: what can't be integrated
 */
export function timelineOf(transactions: Iterable<readonly LedgerRecord[]>): TimelineStep[] {
  const fold = new CampaignFold();
  const steps: TimelineStep[] = [];
  let document: CampaignDocument | null = null;
  let state: EngineState | null = null;
  for (const records of transactions) {
    for (const record of records) fold.apply(record);
    const kinds = records.map(({ kind }) => kind);
    const moving = records.find(({ kind }) => movingKinds.includes(kind));
    if (ledgerChangeOf(kinds) === "none" && moving === undefined) continue;
    const after = fold.document();
    const change = changeOf(ledgerChangeOf(kinds), document, after);
    document = after;
    state = stateAfter(state, after, change);
    if (moving === undefined) continue;
    const { seq, kind } = moving;
    const { seq: lastSeq, at } = records.at(-1)!;
    const points = state === null ? null : evidencesOf(state);
    steps.push({ size: lastSeq + 1, at, movedBy: { seq, kind, ...touchedBy(change) }, points });
  }
  return steps;
}

/** What a transaction did to the measurements, and whether that is all. */
interface Change {
  onlyMeasurements: boolean;
  posted: Measurement[];
  revised: Revision[];
}

function changeOf(
  kind: LedgerChange,
  before: CampaignDocument | null,
  after: CampaignDocument,
): Change {
  const there = new Map(after.measurements.map((one) => [one.id, one]));
  const known = new Set<string>();
  const revised: Revision[] = [];
  before?.measurements.forEach((measurement, place) => {
    known.add(measurement.id);
    const now = there.get(measurement.id) ?? null;
    if (now !== null && JSON.stringify(now) === JSON.stringify(measurement)) return;
    revised.push({ place, before: measurement, after: now });
  });
  const posted = after.measurements.filter(({ id }) => !known.has(id));
  const ties = before?.correlations.length === after.correlations.length;
  const onlyMeasurements = kind !== "document" && (ties || kind === "revised");
  return { onlyMeasurements, posted, revised };
}

function stateAfter(
  state: EngineState | null,
  document: CampaignDocument,
  { onlyMeasurements, posted, revised }: Change,
): EngineState | null {
  if (state === null || !onlyMeasurements) return made(document);
  const result = reviseMeasurements(state, revised);
  if (result === null || !result.ok) return made(document);
  const { worn } = result.value;
  const left = new Set(posted);
  const stayed = document.measurements.filter((one) => !left.has(one));
  remakeMeasurands(state, worn, stayed);
  const added = addMeasurements(state, posted);
  return added.ok ? added.value : made(document);
}

function made(document: CampaignDocument): EngineState | null {
  const result = createState(document);
  return result.ok ? result.value : null;
}

function touchedBy({ posted, revised }: Change): { facilities: string[]; measurements: number } {
  const touched = [...posted, ...revised.map(({ before, after }) => after ?? before)];
  const facilities = new Set(touched.flatMap(({ facility }) => facility ?? []));
  return { facilities: [...facilities].sort(), measurements: touched.length };
}
