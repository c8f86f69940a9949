import { CAMPAIGN_FORMAT } from "@weighhouse/campaign/document";
import type { Campaign, CampaignDocument } from "@weighhouse/campaign/document";
import { KEY_PATTERN } from "@weighhouse/campaign/fields";
import type { Problem } from "@weighhouse/campaign/problem";
import { readCampaignText } from "@weighhouse/campaign/read";
import type { Standings } from "@weighhouse/campaign/standings";
import { scoreCampaign } from "@weighhouse/engine/score";
import { canonicalJson } from "@weighhouse/ledger/canonical";
import { LedgerError } from "@weighhouse/ledger/ledger-error";
import { documentAfter, partsOf } from "./document-after";
import type { NewEntry } from "./document-after";
import { entriesOfDocument } from "./import-entries";
import { isPast } from "./time";

/** What an import would make, worked out without a store. */
export type ImportPlan = {
  /** The document as it was read, its key replaced where another was asked for. */
  document: CampaignDocument;
  /** The campaign's own fields for entry 0. */
  opening: Campaign;
  /** The entries after it. */
  entries: NewEntry[];
  /** The standings that the document has, and those that the campaign will have here. */
  standings: { claimed: Standings; here: Standings };
};

type Planned = { ok: true; plan: ImportPlan } | { ok: false; problems: Problem[] };

/**
 * Plans the import of a campaign document: refuses one that doesn't read, or that the engine
 * can't score, by pointers into the document.
 */
export function planImport(input: { text: string; key: string | null; now: string }): Planned {
  const read = readCampaignText(input.text);
  if (!read.ok) return read;
  const key = input.key ?? read.value.campaign.key;
  if (!KEY_PATTERN.test(key)) return { ok: false, problems: [badKey(key)] };
  const document = { ...read.value, campaign: { ...read.value.campaign, key } };
  const claimed = scoreCampaign(document);
  if (!claimed.ok) return claimed;
  const opening = openingOf(document.campaign, input.now);
  const unwritable = ledgerFault(document);
  if (unwritable !== null) return { ok: false, problems: [unwritable] };
  const entries = entriesOfDocument(document, input.now);
  const here = scoreCampaign(documentHere(opening, entries, input.now));
  if (!here.ok) return here;
  const standings = { claimed: claimed.value, here: here.value };
  return { ok: true, plan: { document, opening, entries, standings } };
}

/** A closing date that has passed is no date to open with: an entry closes registration instead. */
function openingOf(campaign: Campaign, now: string): Campaign {
  const closed = isPast(campaign.registrationCloses, now);
  return closed ? { ...campaign, registrationCloses: null } : campaign;
}

/** Who imports does so in no team's name. */
const IMPORTER = { member: "importer", team: null };

/** The document that the new ledger will fold to, but for the entries' very times. */
function documentHere(opening: Campaign, entries: NewEntry[], now: string): CampaignDocument {
  const empty: CampaignDocument = {
    format: CAMPAIGN_FORMAT,
    campaign: opening,
    observables: [],
    measurands: [],
    derived: [],
    sharedErrors: [],
    facilities: [],
    teams: [],
    hypotheses: [],
    measurements: [],
    correlations: [],
  };
  return documentAfter(partsOf(empty), entries, { by: IMPORTER, at: now, size: 1 });
}

/** What reads as JSON and no entry can hold: U+0000, half a surrogate pair. */
function ledgerFault(document: CampaignDocument): Problem | null {
  try {
    canonicalJson(document);
    return null;
  } catch (error) {
    if (!(error instanceof LedgerError)) throw error;
    const [, pointer = "", found = error.message, allowed = "what an entry can hold"] =
      /^([^:]*): found (.*); allowed is (.*)$/s.exec(error.message) ?? [];
    return { pointer, code: "bad-format", found, allowed };
  }
}

function badKey(key: string): Problem {
  return {
    pointer: "/key",
    code: "bad-format",
    found: JSON.stringify(key),
    allowed: "1 to 64 of a-z, 0-9 and -, starting with a letter or digit",
  };
}
