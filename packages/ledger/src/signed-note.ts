import { ed25519 } from "@noble/curves/ed25519.js";
import { base64, fromBase64, sameBytes, utf8 } from "./bytes";
import { LedgerError } from "./ledger-error";
import type { VerifierKey } from "./verifier-key";

/** Signs with an Ed25519 key under the name by which notes call it. */
export type NoteSigner = VerifierKey & { sign: (bytes: Uint8Array) => Uint8Array };

/** True where the Ed25519 signature (RFC 8032) is good. */
export type VerifySignature = (
  signature: Uint8Array,
  message: Uint8Array,
  publicKey: Uint8Array,
) => boolean;

export type NoteFault = "malformed-note" | "no-known-key" | "bad-signature";
export type NoteOutcome =
  | { ok: true; text: string; signedBy: VerifierKey[] }
  | { ok: false; reason: NoteFault; detail: string };

type SignatureLine = { name: string; keyHash: Uint8Array; signature: Uint8Array };

const MAX_SIGNATURES = 16;

/** Ed25519 in plain JavaScript, strict as RFC 8032 says (not ZIP 215), for browsers. */
export const nobleVerifySignature: VerifySignature = (signature, message, publicKey) =>
  ed25519.verify(signature, message, publicKey, { zip215: false });

/**
 * Signs a text as a C2SP signed note: the text, a blank line, and one line
 * `— name base64(key hash || signature)`.
 *
 * @throws {LedgerError} `not-a-tree-head` unless the text is lines without control characters
 */
export function signNote(text: string, signer: NoteSigner): string {
  if (!isNoteText(text)) {
    throw new LedgerError(
      "not-a-tree-head",
      "found a text with control characters or without a last newline; allowed are whole lines",
    );
  }
  const signature = signer.sign(utf8(text));
  return `${text}\n\u2014 ${signer.name} ${base64(Uint8Array.of(...signer.keyHash, ...signature))}\n`;
}

/**
 * The text of a note, given that a known key signed it.
 *
 * As C2SP says, signatures of unknown keys are passed over; one bad signature of a known key spoils
 * the note.
 */
export function verifyNote(
  note: string,
  keys: readonly VerifierKey[],
  verifySignature: VerifySignature = nobleVerifySignature,
): NoteOutcome {
  const parsed = parseNote(note);
  if (!parsed.ok) return { ok: false, reason: "malformed-note", detail: parsed.detail };
  const message = utf8(parsed.text);
  const signedBy: VerifierKey[] = [];
  for (const line of parsed.signatures) {
    const key = keys.find((k) => k.name === line.name && sameBytes(k.keyHash, line.keyHash));
    if (key === undefined) continue;
    if (!isGood(verifySignature, line.signature, message, key.publicKey)) {
      return { ok: false, reason: "bad-signature", detail: `the signature of ${key.name}` };
    }
    signedBy.push(key);
  }
  if (signedBy.length === 0) {
    const names = parsed.signatures.map((line) => line.name).join(", ");
    return { ok: false, reason: "no-known-key", detail: `signed by ${names}` };
  }
  return { ok: true, text: parsed.text, signedBy };
}

/** Parts a note into its text and its signature lines, without checking any signature. */
export function parseNote(
  note: string,
): { ok: true; text: string; signatures: SignatureLine[] } | { ok: false; detail: string } {
  if (!isNoteText(note)) {
    return { ok: false, detail: "control characters, or no newline at its end" };
  }
  const blank = note.lastIndexOf("\n\n");
  if (blank < 0) return { ok: false, detail: "no blank line before signatures" };
  const lines = note.slice(blank + 2, -1).split("\n");
  if (lines.length > MAX_SIGNATURES) {
    return { ok: false, detail: `more than ${MAX_SIGNATURES} signatures` };
  }
  const signatures: SignatureLine[] = [];
  for (const line of lines) {
    const match = /^\u2014 ([^\s+]+) ([^\s]+)$/u.exec(line);
    const bytes = match === null ? null : fromBase64(match[2] as string);
    if (match === null || bytes === null || bytes.length <= 4) {
      return { ok: false, detail: `a signature line ${JSON.stringify(line.slice(0, 80))}` };
    }
    signatures.push({
      name: match[1] as string,
      keyHash: bytes.slice(0, 4),
      signature: bytes.slice(4),
    });
  }
  return { ok: true, text: note.slice(0, blank + 1), signatures };
}

function isGood(
  verifySignature: VerifySignature,
  signature: Uint8Array,
  message: Uint8Array,
  publicKey: Uint8Array,
): boolean {
  if (signature.length !== 64) return false;
  try {
    return verifySignature(signature, message, publicKey);
  } catch {
    // Libraries throw on a key or signature that is no point of the curve.
    return false;
  }
}

function isNoteText(text: string): boolean {
  // oxlint-disable-next-line no-control-regex -- control characters are what C2SP forbids here.
  return text.endsWith("\n") && !/[\u0000-\u0009\u000b-\u001f]|\p{Surrogate}/u.test(text);
}
