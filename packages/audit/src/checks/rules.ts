import { CampaignError } from "@weighhouse/campaign/campaign-error";
import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { CampaignFold } from "@weighhouse/campaign/fold";
import { counted, failed, ok } from "./line";
import type { Checked } from "./line";
import { PAYLOADS } from "../layout";

/**
 * Every entry is one that could be appended where it stands: the rules that the server asks before
 * it appends, asked again. Gives the document that the entries add up to; after an entry that breaks
 * a rule nothing is known of the others, so the first is the only one that is named.
 */
export function checkRules(records: readonly LedgerRecord[]): Checked<CampaignDocument> {
  const check = "rules of the entries";
  const fold = new CampaignFold();
  for (const record of records) {
    const broken = attempt(fold, record);
    if (broken !== null) {
      const place = `${PAYLOADS}, line ${record.seq + 1}: ${broken}`;
      return { line: failed(check, place), value: null };
    }
  }
  const detail = `${counted(records.length, "entry", "entries")}, each allowed where it stands`;
  return { line: ok(check, detail), value: fold.document() };
}

function attempt(fold: CampaignFold, record: LedgerRecord): string | null {
  try {
    fold.apply(record);
    return null;
  } catch (error) {
    if (error instanceof CampaignError) return error.message;
    throw error;
  }
}
