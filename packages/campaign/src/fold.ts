import { changesOf, contentAfter, partNames } from "./changes";
import type { LedgerRecord, PartContent, PartName } from "./changes";
import { completeDocument } from "./complete";
import {
  campaignSchema,
  derivedSchema,
  facilitySchema,
  measurandSchema,
  observableSchema,
  sharedErrorSchema,
  teamSchema,
} from "./declarations";
import { CAMPAIGN_FORMAT } from "./document";
import type { CampaignDocument, DocumentForm } from "./document";
import { hypothesisSchema } from "./hypothesis";
import { correlationSchema, measurementSchema } from "./measurement";
import { membersOf } from "./schema-def";

/** A part as the fold leaves it: what the projections hold a row of. */
export type Part = { part: PartName; key: string; content: PartContent };

/**
 * The campaign document from the entries of a ledger, one after another. Pure: the same entries
 * give the same document.
 */
export class CampaignFold {
  #parts = new Map<PartName, Map<string, PartContent>>(
    partNames.map((part) => [part, new Map<string, PartContent>()]),
  );
  #size = 0;

  /** The number of entries applied. */
  get size(): number {
    return this.#size;
  }

  /** @throws {CampaignError} for a payload that isn't one, or a change of what isn't there */
  apply(record: LedgerRecord): void {
    for (const change of changesOf(record)) {
      const ofName = this.#parts.get(change.part)!;
      ofName.set(change.key, contentAfter(change, ofName.get(change.key) ?? null));
    }
    this.#size += 1;
  }

  /** Every part in the order of its first put. */
  parts(): Part[] {
    return [...this.#parts].flatMap(([part, contents]) =>
      [...contents].map(([key, content]) => ({ part, key, content })),
    );
  }

  document(): CampaignDocument {
    return documentFromParts(this.parts());
  }
}

export function foldRecords(records: Iterable<LedgerRecord>): CampaignDocument {
  const fold = new CampaignFold();
  for (const record of records) fold.apply(record);
  return fold.document();
}

/**
 * The document whose parts these are, in the order of their first put. What only the ledger knows
 * of a part (its ledger id, clock, claimed dates) is left out.
 *
 * @param parts one of them the campaign
 */
export function documentFromParts(parts: Iterable<Part>): CampaignDocument {
  const lists: Record<PartName, PartContent[]> = {
    campaign: [],
    observable: [],
    measurand: [],
    derived: [],
    sharedError: [],
    facility: [],
    team: [],
    hypothesis: [],
    measurement: [],
    correlation: [],
  };
  for (const { part, content } of parts) lists[part].push(documentContent(part, content));
  const form = {
    format: CAMPAIGN_FORMAT,
    campaign: lists.campaign[0],
    observables: lists.observable,
    measurands: lists.measurand,
    derived: lists.derived,
    sharedErrors: lists.sharedError,
    facilities: lists.facility,
    teams: lists.team,
    hypotheses: lists.hypothesis,
    measurements: lists.measurement,
    correlations: lists.correlation,
  };
  // Each content was read by its payload's schema, whose fields are the document's.
  return completeDocument(form as unknown as DocumentForm);
}

/** The fields that the document has, in the schema's order; what only the ledger has is left out. */
function documentContent(part: PartName, content: PartContent): PartContent {
  const fields: PartContent = {};
  for (const name of fieldsOf[part]) fields[name] = content[name];
  return fields;
}

const fieldsOf: Record<PartName, readonly string[]> = {
  campaign: membersOf(campaignSchema),
  observable: membersOf(observableSchema),
  measurand: membersOf(measurandSchema),
  derived: membersOf(derivedSchema),
  sharedError: membersOf(sharedErrorSchema),
  facility: membersOf(facilitySchema),
  team: membersOf(teamSchema),
  hypothesis: membersOf(hypothesisSchema),
  measurement: membersOf(measurementSchema),
  correlation: membersOf(correlationSchema),
};
