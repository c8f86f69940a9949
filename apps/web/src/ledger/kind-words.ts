import type { EntryKind } from "@weighhouse/campaign/entries";

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
  "registration.closed": "registration closed",
  "measurements.posted": "measurements posted",
  "measurement.set-aside": "measurement set aside",
};

export function kindInWords(kind: string): string {
  return Object.hasOwn(kindWords, kind) ? kindWords[kind as EntryKind] : kind;
}
