import { hkdfSync, randomBytes } from "node:crypto";
import type { Store } from "./open-store";
import { decryptSealed, encryptSealed, SEAL_KEY_BYTES, sealKeyOf } from "./seal-key";
import type { SealKey } from "./seal-key";
import { StoreError } from "./store-error";

const SECRET_BYTES = 32;

/** Where a secret belongs: moved to another webhook, its ciphertext doesn't decrypt. */
type Place = { campaign: string; webhook: string };

export type EncryptedSecret = { encrypted: Uint8Array; keyFingerprint: string };

/** 43 letters, digits, - and _: its ASCII bytes are the key that deliveries are signed with. */
export function newSecret(): string {
  return randomBytes(SECRET_BYTES).toString("base64url");
}

export function encryptSecret(store: Store, place: Place, secret: string): EncryptedSecret {
  const sealKey = requireSealKey(store);
  const { campaign, webhook: digest } = place;
  const encrypted = encryptSealed(webhookKey(sealKey), { campaign, digest }, secret);
  return { encrypted, keyFingerprint: sealKey.fingerprint };
}

/** @throws {StoreError} `bad-keys` where it was encrypted with another key or altered */
export function decryptSecret(store: Store, place: Place, encrypted: Uint8Array): string {
  const sealKey = requireSealKey(store);
  const { campaign, webhook: digest } = place;
  try {
    return decryptSealed(webhookKey(sealKey), { campaign, digest }, encrypted);
  } catch (cause) {
    throw new StoreError(
      "bad-keys",
      `${campaign}: found a webhook's secret that the key ${sealKey.fingerprint} doesn't open; allowed is the one that it was made with`,
      { cause },
    );
  }
}

/** Derived (HKDF, RFC 5869) from the installation's key for secrets: one key, one use. */
function webhookKey(sealKey: SealKey): SealKey {
  const bytes = hkdfSync("sha256", sealKey.bytes, "", "weighhouse webhooks", SEAL_KEY_BYTES);
  return sealKeyOf(new Uint8Array(bytes));
}

function requireSealKey({ sealKey }: Store): SealKey {
  if (sealKey !== null) return sealKey;
  throw new StoreError(
    "no-seal-key",
    "this installation holds no key to encrypt a webhook's secret with (seals.key in its folder of keys); allowed are the feed and the event stream, which need none",
  );
}
