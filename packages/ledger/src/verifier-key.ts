import { base64, fromBase64, hex, utf8 } from "./bytes";
import { LedgerError } from "./ledger-error";
import { nobleHasher } from "./noble-hasher";

/** A public key with the name by which notes call it (C2SP signed-note). */
export type VerifierKey = {
  name: string;
  /** Ed25519, 32 bytes (RFC 8032). */
  publicKey: Uint8Array;
  /** First four bytes of SHA-256(name || 0x0A || 0x01 || public key). */
  keyHash: Uint8Array;
};

/** C2SP's signature type for plain Ed25519. */
const ED25519 = Uint8Array.of(0x01);
const NEWLINE = Uint8Array.of(0x0a);

/** @throws {LedgerError} `not-a-key` on a name with white space or plus, or a key not of 32 bytes */
export function verifierKey(name: string, publicKey: Uint8Array): VerifierKey {
  if (!/^[^\s+\p{Cc}]{1,200}$/u.test(name)) {
    throw new LedgerError(
      "not-a-key",
      `found the key name ${JSON.stringify(name)}; allowed are 1 to 200 characters without white space or plus`,
    );
  }
  if (publicKey.length !== 32) {
    throw new LedgerError("not-a-key", `found ${publicKey.length} bytes; allowed are 32`);
  }
  const keyHash = nobleHasher(utf8(name), NEWLINE, ED25519, publicKey).slice(0, 4);
  return { name, publicKey, keyHash };
}

/** The text of a verifier key: `name+hash+base64(type || key)`. */
export function encodeVerifierKey({ name, publicKey, keyHash }: VerifierKey): string {
  return `${name}+${hex(keyHash)}+${base64(Uint8Array.of(...ED25519, ...publicKey))}`;
}

/**
 * Reads the text of a verifier key.
 *
 * @throws {LedgerError} `not-a-key` on another shape, another type than Ed25519, or a hash that
 * isn't the key's
 */
export function decodeVerifierKey(text: string): VerifierKey {
  const match = /^([^+]+)\+([0-9a-f]{8})\+(.+)$/u.exec(text.trim());
  const body = match === null ? null : fromBase64(match[3] as string);
  if (match === null || body === null) {
    throw new LedgerError("not-a-key", "found another text; allowed is name+hash+base64");
  }
  if (body[0] !== ED25519[0]) {
    throw new LedgerError("not-a-key", `found key type ${body[0]}; allowed is 1 (Ed25519)`);
  }
  const key = verifierKey(match[1] as string, body.slice(1));
  if (hex(key.keyHash) !== match[2]) {
    throw new LedgerError(
      "not-a-key",
      `found key hash ${match[2]}; allowed is ${hex(key.keyHash)}`,
    );
  }
  return key;
}

/** SHA-256 of the 32 bytes of a public key, lower-case hexadecimal: what people compare. */
export function fingerprint(publicKey: Uint8Array): string {
  return hex(nobleHasher(publicKey));
}
