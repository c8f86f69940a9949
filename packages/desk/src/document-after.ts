import { CAMPAIGN_PART, changesOf, contentAfter, partNames } from "@weighhouse/campaign/changes";
import type { LedgerRecord, PartContent, PartName } from "@weighhouse/campaign/changes";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { EntryKind, Payload } from "@weighhouse/campaign/entries";
import { documentFromParts } from "@weighhouse/campaign/fold";
import { instantAfter } from "./time";

export type NewEntry = { [K in EntryKind]: { kind: K; payload: Payload<K> } }[EntryKind];

/** Who appends, and the time that the first entry is taken to have. */
export type Moment = { by: LedgerRecord["by"]; at: string };

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
} as const satisfies Record<Exclude<PartName, "campaign">, keyof CampaignDocument>;
export type ListName = (typeof listOf)[keyof typeof listOf];

/** The campaign document as it would be once these entries were appended, by the ledger's own fold. */
export function documentAfter(
  document: CampaignDocument,
  entries: NewEntry[],
  moment: Moment,
): CampaignDocument {
  const parts = partsOf(document);
  for (const [i, { kind, payload }] of entries.entries()) {
    const at = instantAfter(moment.at, i);
    for (const change of changesOf({ seq: i, at, by: moment.by, kind, payload })) {
      const ofName = parts.get(change.part)!;
      ofName.set(change.key, contentAfter(change, ofName.get(change.key) ?? null));
    }
  }
  return documentFromParts(
    [...parts].flatMap(([part, contents]) =>
      [...contents].map(([key, content]) => ({ part, key, content })),
    ),
  );
}

/** The document taken apart again into what `changesOf` speaks of. */
function partsOf(document: CampaignDocument): Map<PartName, Map<string, PartContent>> {
  return new Map(
    partNames.map((part) => {
      const contents: PartContent[] =
        part === "campaign" ? [document.campaign] : document[listOf[part]];
      return [part, new Map(contents.map((content) => [keyOf(part, content), content]))];
    }),
  );
}

function keyOf(part: PartName, content: PartContent): string {
  if (part === "campaign") return CAMPAIGN_PART;
  if (part === "measurement") return String(content["id"]);
  if (part === "correlation") return `${String(content["a"])} ${String(content["b"])}`;
  return String(content["key"]);
}
