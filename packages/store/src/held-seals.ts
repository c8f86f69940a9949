import type { Alongside } from "./append";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import { decryptSealed, encryptSealed } from "./seal-key";
import type { SealKey } from "./seal-key";
import { StoreError } from "./store-error";

/** What the server holds of a seal. */
export type HeldContent = { nonce: string; content: Record<string, unknown> };

/** Writes a content that is held, encrypted, in the transaction that puts its seal on record. */
export function holding(
  store: Store,
  seal: { campaign: string; digest: string; held: HeldContent },
): Alongside {
  const { campaign, digest, held } = seal;
  const key = requireSealKey(store);
  const encrypted = encryptSealed(key, { campaign, digest }, JSON.stringify(held));
  return (tx, campaignId) => tx`
    insert into held_seals (campaign_id, digest, encrypted, key_fingerprint)
    values (${campaignId}, ${digest}, ${Buffer.from(encrypted)}, ${key.fingerprint})`;
}

/** Forgets what was held, in the transaction that opens its seal: from then on it is public. */
export function releasing(digest: string): Alongside {
  return (tx, campaignId) => tx`
    delete from held_seals where campaign_id = ${campaignId} and digest = ${digest}`;
}

/** A content that is held; null where none is under that digest. */
export async function readHeld(
  store: Store,
  { campaign, digest }: { campaign: string; digest: string },
): Promise<HeldContent | null> {
  const { id } = await findCampaign(store, campaign, store.db);
  const [row] = await store.sql<{ encrypted: Buffer }[]>`
    select encrypted from held_seals where campaign_id = ${id} and digest = ${digest}`;
  if (row === undefined) return null;
  const text = decryptSealed(requireSealKey(store), { campaign, digest }, row.encrypted);
  return JSON.parse(text) as HeldContent;
}

function requireSealKey({ sealKey }: Store): SealKey {
  if (sealKey !== null) return sealKey;
  throw new StoreError(
    "no-seal-key",
    "this installation holds no key for seals (seals.key in its folder of keys); allowed are seals that their team keeps",
  );
}
