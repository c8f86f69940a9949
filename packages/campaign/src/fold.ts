import { changesOf } from "./changes";
import type { LedgerRecord } from "./changes";
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
import { documentParts, Parts } from "./parts";
import type { DocumentPart, Part, PartContent } from "./parts";
import { membersOf } from "./schema-def";
import { isCurrent } from "./selection";

export type { Part } from "./parts";

/**
 * The campaign document from the entries of a ledger, one after another. Pure: the same entries
 * give the same document.
 */
export class CampaignFold {
  readonly #parts = new Parts();
  #size = 0;

  /** The number of entries applied. */
  get size(): number {
    return this.#size;
  }

  /**
   * @throws {CampaignError} `not-a-payload`, `rule-broken`, with the entry's seq and the reason;
   *   the fold is as before then
   */
  apply(record: LedgerRecord): void {
    for (const part of changesOf(record, this.#parts)) this.#parts.put(part);
    this.#size += 1;
  }

  /** Every part in the order of its first put. */
  parts(): Part[] {
    return [...this.#parts.everything()];
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
 * of a part (its ledger id, clock, claimed dates) is left out, and so are withdrawn measurements
 * and the correlations of these.
 *
 * @param parts one of them the campaign
 */
export function documentFromParts(parts: Iterable<Part>): CampaignDocument {
  const lists: Record<DocumentPart, PartContent[]> = {
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
  const withdrawn = new Set<string>();
  for (const { part, key, content } of parts) {
    if (!isDocumentPart(part)) continue;
    if (part === "measurement" && !isCurrent(content)) withdrawn.add(key);
    else lists[part].push(documentContent(part, content));
  }
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
    correlations: lists.correlation.filter(
      ({ a, b }) => !withdrawn.has(String(a)) && !withdrawn.has(String(b)),
    ),
  };
  // Each content was read by its payload's schema, whose fields are the document's.
  return completeDocument(form as unknown as DocumentForm);
}

function isDocumentPart(part: string): part is DocumentPart {
  return (documentParts as readonly string[]).includes(part);
}

/** The fields that the document has, in the schema's order; what only the ledger has is left out. */
function documentContent(part: DocumentPart, content: PartContent): PartContent {
  const fields: PartContent = {};
  for (const name of fieldsOf[part]) fields[name] = content[name];
  return fields;
}

const fieldsOf: Record<DocumentPart, readonly string[]> = {
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
