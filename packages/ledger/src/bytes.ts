import { bytesToHex } from "@noble/hashes/utils.js";
import { LedgerError } from "./ledger-error";

/** True where a string holds half a surrogate pair, which UTF-8 can't carry. */
export function hasLoneSurrogate(text: string): boolean {
  return /\p{Surrogate}/u.test(text);
}

/**
 * UTF-8 bytes of a text.
 *
 * TextEncoder writes U+FFFD for a lone surrogate, so two texts would share one digest: refused.
 *
 * @throws {LedgerError} `not-json` on a lone surrogate
 */
export function utf8(text: string): Uint8Array {
  if (hasLoneSurrogate(text)) {
    throw new LedgerError(
      "not-json",
      "found half a surrogate pair; allowed is well-formed Unicode",
    );
  }
  return new TextEncoder().encode(text);
}

/** Lower-case hexadecimal. */
export function hex(bytes: Uint8Array): string {
  return bytesToHex(bytes);
}

export function sameBytes(a: Uint8Array, b: Uint8Array): boolean {
  return a.length === b.length && a.every((byte, index) => byte === b[index]);
}

/** Standard base64 with padding (RFC 4648 section 4). */
export function base64(bytes: Uint8Array): string {
  let binary = "";
  for (const byte of bytes) binary += String.fromCharCode(byte);
  return btoa(binary);
}

/**
 * Bytes of a base64 text, or null.
 *
 * Only the one spelling that `base64` writes is read: atob lets white space, missing padding and
 * stray trailing bits pass, by which one signature would have several texts.
 */
export function fromBase64(text: string): Uint8Array | null {
  let binary: string;
  try {
    binary = atob(text);
  } catch {
    return null;
  }
  const bytes = Uint8Array.from(binary, (character) => character.charCodeAt(0));
  return base64(bytes) === text ? bytes : null;
}
