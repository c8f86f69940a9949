import { changesOf } from "@weighhouse/campaign/changes";
import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { EntryKind, Payload } from "@weighhouse/campaign/entries";
import { documentFromParts } from "@weighhouse/campaign/fold";
import { CAMPAIGN_PART, Parts, documentParts } from "@weighhouse/campaign/parts";
import type { DocumentPart, Part, PartContent } from "@weighhouse/campaign/parts";
import { instantAfter } from "./time";

export type NewEntry = { [K in EntryKind]: { kind: K; payload: Payload<K> } }[EntryKind];

/** Who appends, the time that the first entry is taken to have, and its seq. */
export type Moment = { by: LedgerRecord["by"]; at: string; size: number };

const listOf = {
  observable: "observables",
  measurand: "measurands",
  derived: "derived",
  sharedError: "sharedErrors",
  facility: "facilities",
  team: "teams",
  hypothesis: "hypotheses",
  measurement: "measurements",
  correlation: "correlations",
} as const satisfies Record<Exclude<DocumentPart, "campaign">, keyof CampaignDocument>;
export type ListName = (typeof listOf)[keyof typeof listOf];

/**
 * The campaign document as it would be once these entries were appended, by the ledger's own fold
 * and rules.
 *
 * @param before what all earlier entries left
 * @throws {CampaignError} `rule-broken` for an entry that may not be appended
 */
export function documentAfter(
  before: Iterable<Part>,
  entries: NewEntry[],
  moment: Moment,
): CampaignDocument {
  const parts = new Parts(before);
  for (const [i, { kind, payload }] of entries.entries()) {
    const at = instantAfter(moment.at, i);
    const record = { seq: moment.size + i, at, by: moment.by, kind, payload };
    for (const part of changesOf(record, parts)) parts.put(part);
  }
  return documentFromParts(parts.everything());
}

/** The document taken apart again, for what is judged beside it alone. */
export function* partsOf(document: CampaignDocument): Generator<Part> {
  for (const part of documentParts) {
    const contents: PartContent[] =
      part === "campaign" ? [document.campaign] : document[listOf[part]];
    for (const content of contents) yield { part, key: keyOf(part, content), content };
  }
}

function keyOf(part: DocumentPart, content: PartContent): string {
  if (part === "campaign") return CAMPAIGN_PART;
  if (part === "measurement") return String(content["id"]);
  if (part === "correlation") return `${String(content["a"])} ${String(content["b"])}`;
  return String(content["key"]);
}
