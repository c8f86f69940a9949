import type { EntryKind } from "./entries";

/** What a transaction does to a campaign's document, as far as scoring goes. */
export type LedgerChange =
  /** Nothing that is scored. */
  | "none"
  /** Measurements more, and no more correlations. */
  | "posted"
  /** Measurements that were there are corrected, set aside or withdrawn. */
  | "revised"
  /** Anything else. */
  | "document";

const changeOfKind: Record<EntryKind, LedgerChange> = {
  "campaign.opened": "document",
  "campaign.amended": "document",
  "observable.declared": "document",
  "measurand.declared": "document",
  "measurand.closed": "document",
  "derived.declared": "document",
  "shared-error.declared": "document",
  "facility.declared": "document",
  "team.joined": "document",
  "measurand.proposed": "none",
  "reference.objected": "none",
  "hypothesis.registered": "document",
  "hypothesis.amended": "document",
  // It stays, with its standing.
  "hypothesis.retired": "none",
  "prediction.sealed": "document",
  "prediction.revealed": "document",
  "registration.closed": "document",
  "measurements.posted": "posted",
  "measurement.corrected": "revised",
  "measurements.withdrawn": "revised",
  "measurement.set-aside": "revised",
  "measurement.sealed": "none",
  "measurement.revealed": "posted",
  "remark.made": "none",
  "standings.cited": "none",
  "ledger.restored": "none",
};

/** Of several entries together: one that says nothing beside another is as if it weren't there. */
export function ledgerChangeOf(kinds: readonly EntryKind[]): LedgerChange {
  const changes = new Set(kinds.map((kind) => changeOfKind[kind]));
  changes.delete("none");
  const [only, more] = changes;
  if (more !== undefined) return "document";
  return only ?? "none";
}

/** Entries of these kinds change measurements or hypotheses: the timeline has a point for each. */
export const movingKinds: readonly EntryKind[] = [
  "measurements.posted",
  "measurement.set-aside",
  "measurement.corrected",
  "measurements.withdrawn",
  "measurement.revealed",
  "measurand.closed",
  "hypothesis.registered",
  "hypothesis.amended",
  "hypothesis.retired",
  "prediction.sealed",
  "prediction.revealed",
];
