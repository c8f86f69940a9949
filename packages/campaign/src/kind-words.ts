import type { EntryKind } from "./entries";

/** What each kind of entry did, in plain words; the kind itself stands beside it. */
const kindWords: Record<EntryKind, string> = {
  "campaign.opened": "campaign opened",
  "campaign.amended": "campaign amended",
  "observable.declared": "kind of quantity declared",
  "measurand.declared": "quantity declared",
  "measurand.closed": "quantity closed",
  "derived.declared": "derived quantity declared",
  "shared-error.declared": "shared error declared",
  "facility.declared": "facility declared",
  "team.joined": "team joined",
  "hypothesis.registered": "hypothesis registered",
  "hypothesis.amended": "hypothesis amended",
  "measurand.proposed": "quantity proposed",
  "reference.objected": "objection to a no-model range",
  "hypothesis.retired": "hypothesis retired",
  "prediction.sealed": "prediction sealed",
  "prediction.revealed": "sealed prediction opened",
  "measurement.corrected": "measurement corrected",
  "measurements.withdrawn": "measurements withdrawn",
  "measurement.sealed": "measurement sealed",
  "measurement.revealed": "sealed measurement opened",
  "remark.made": "remark",
  "standings.cited": "standings cited",
  "ledger.restored": "database restored from a backup",
  "registration.closed": "registration closed",
  "measurements.posted": "measurements posted",
  "measurement.set-aside": "measurement set aside",
};

export function kindInWords(kind: string): string {
  return Object.hasOwn(kindWords, kind) ? kindWords[kind as EntryKind] : kind;
}
