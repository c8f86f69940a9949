import { base64, utf8 } from "@weighhouse/ledger/bytes";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { formatTreeHead, signTreeHead } from "@weighhouse/ledger/tree-head";
import { findCampaign } from "../campaigns";
import type { Store } from "../open-store";

/** A head that the house signed of entries which a restored backup has no more. */
export async function lostHead(
  store: Store,
  campaign: string,
  size: number,
): Promise<{ note: string; root: string }> {
  const { ledger } = await findCampaign(store, campaign);
  const root = nodeHasher(utf8(`${size} entries`));
  const note = signTreeHead(formatTreeHead({ origin: ledger, size, root }), store.signer!);
  return { note, root: base64(root) };
}
