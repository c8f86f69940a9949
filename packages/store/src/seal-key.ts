import { createCipheriv, createDecipheriv, createHash, randomBytes } from "node:crypto";
import { StoreError } from "./store-error";

/** The key that contents of held seals are encrypted with; it is nowhere in the database. */
export type SealKey = { bytes: Uint8Array; fingerprint: string };

export const SEAL_KEY_BYTES = 32;
const IV_BYTES = 12;
const TAG_BYTES = 16;

/** What a ciphertext is bound to: moved to another seal, it doesn't decrypt. */
type Place = { campaign: string; digest: string };

export function sealKeyOf(bytes: Uint8Array): SealKey {
  const fingerprint = createHash("sha256").update(bytes).digest("hex").slice(0, 16);
  return { bytes, fingerprint };
}

/** AES-256-GCM: 12 random bytes, the ciphertext, 16 bytes of tag. */
export function encryptSealed(key: SealKey, place: Place, text: string): Uint8Array {
  const iv = randomBytes(IV_BYTES);
  const cipher = createCipheriv("aes-256-gcm", key.bytes, iv);
  cipher.setAAD(associated(place));
  const body = Buffer.concat([cipher.update(text, "utf8"), cipher.final()]);
  return new Uint8Array(Buffer.concat([iv, body, cipher.getAuthTag()]));
}

/** @throws {StoreError} `bad-keys` where it was encrypted with another key, for another seal, or altered */
export function decryptSealed(key: SealKey, place: Place, encrypted: Uint8Array): string {
  const iv = encrypted.subarray(0, IV_BYTES);
  const tag = encrypted.subarray(-TAG_BYTES);
  const body = encrypted.subarray(IV_BYTES, -TAG_BYTES);
  try {
    const decipher = createDecipheriv("aes-256-gcm", key.bytes, iv, { authTagLength: TAG_BYTES });
    decipher.setAAD(associated(place));
    decipher.setAuthTag(tag);
    return Buffer.concat([decipher.update(body), decipher.final()]).toString("utf8");
  } catch (cause) {
    throw new StoreError(
      "bad-keys",
      `${place.campaign}: found a held content that the key ${key.fingerprint} doesn't open; allowed is the one that it was sealed with`,
      { cause },
    );
  }
}

function associated({ campaign, digest }: Place): Buffer {
  return Buffer.from(`${campaign}\n${digest}`, "utf8");
}
