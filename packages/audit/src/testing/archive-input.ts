import { ENGINE_VERSION } from "@weighhouse/engine/version";
import { scoreCampaign } from "@weighhouse/engine/score";
import { foldRecords } from "@weighhouse/campaign/fold";
import { base64 } from "@weighhouse/ledger/bytes";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import type { NoteSigner } from "@weighhouse/ledger/signed-note";
import type { ArchiveInput } from "../write";
import { appendTransactions } from "./synthetic-ledger";
import type { Posting, SyntheticLedger } from "./synthetic-ledger";

export const LEDGER_ID = "house.example/5f1d3c0a9be84e27";

/** What `writeArchive` takes, for the transactions of a campaign. */
export function archiveInputOf(
  campaign: string,
  transactions: Posting[][],
  signer: NoteSigner,
): ArchiveInput & SyntheticLedger {
  const ledger = appendTransactions(campaign, LEDGER_ID, transactions, signer);
  const document = foldRecords(ledger.records);
  const { size, root } = parseTreeHead(ledger.heads.at(-1) as string);
  const scored = scoreCampaign(document, { asOf: { size, treeHead: base64(root) } });
  if (!scored.ok) throw new Error(JSON.stringify(scored.problems));
  return { ...ledger, document, standings: scored.value, engine: ENGINE_VERSION, signer };
}
