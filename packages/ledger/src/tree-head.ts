import { base64, fromBase64 } from "./bytes";
import { HASH_BYTES } from "./hasher";
import { LedgerError } from "./ledger-error";
import { parseNote, signNote, verifyNote } from "./signed-note";
import type { NoteFault, NoteSigner, VerifySignature } from "./signed-note";
import type { VerifierKey } from "./verifier-key";

/** What a signed tree head says: the ledger (origin), its size and its root. C2SP tlog-checkpoint. */
export type TreeHead = { origin: string; size: number; root: Uint8Array };

/**
 * One key signs the heads of all ledgers of an installation, so its name names the installation,
 * and the origin line the ledger.
 */
export type TreeHeadSigner = NoteSigner;

export type TreeHeadOutcome =
  | { ok: true; head: TreeHead; signedBy: VerifierKey[] }
  | { ok: false; reason: NoteFault | "malformed-head"; detail: string };

/** The text that is signed: origin, size in decimal, root in base64, a line each. */
export function formatTreeHead({ origin, size, root }: TreeHead): string {
  const text = `${origin}\n${size}\n${base64(root)}\n`;
  parseTreeHead(text);
  return text;
}

/**
 * Reads the text of a tree head, or of a note around one (whose signatures are not checked).
 * Extension lines, which C2SP allows, are read past.
 *
 * @throws {LedgerError} `not-a-tree-head`
 */
export function parseTreeHead(text: string): TreeHead {
  const note = text.includes("\n\n") ? parseNote(text) : { ok: true as const, text };
  if (!note.ok) throw refusal(note.detail, "a signed note");
  const lines = note.text.split("\n");
  const [origin, size, root, ...rest] = lines;
  if (origin === undefined || !/^[^\s\p{Cc}]{1,300}$/u.test(origin)) {
    throw refusal(
      `the origin ${JSON.stringify(origin)}`,
      "1 to 300 characters without white space",
    );
  }
  if (size === undefined || !/^(0|[1-9]\d{0,15})$/.test(size) || !Number.isSafeInteger(+size)) {
    throw refusal(`the size ${JSON.stringify(size)}`, "a decimal number without leading zeros");
  }
  const hash = root === undefined ? null : fromBase64(root);
  if (hash?.length !== HASH_BYTES) {
    throw refusal(`the root ${JSON.stringify(root)}`, "32 bytes in base64");
  }
  if (rest.pop() !== "" || rest.includes("")) {
    throw refusal("an empty line or no last newline", "whole lines that are not empty");
  }
  return { origin, size: Number(size), root: hash };
}

/** A signed note over the text of a tree head. */
export function signTreeHead(text: string, signer: TreeHeadSigner): string {
  parseTreeHead(text);
  return signNote(text, signer);
}

/** The tree head in a note that one of the keys signed. */
export function verifyTreeHead(
  note: string,
  publicKeys: readonly VerifierKey[],
  verifySignature?: VerifySignature,
): TreeHeadOutcome {
  const verified = verifyNote(note, publicKeys, verifySignature);
  if (!verified.ok) return verified;
  try {
    return { ok: true, head: parseTreeHead(verified.text), signedBy: verified.signedBy };
  } catch (error) {
    if (!(error instanceof LedgerError)) throw error;
    return { ok: false, reason: "malformed-head", detail: error.message };
  }
}

function refusal(found: string, allowed: string): LedgerError {
  return new LedgerError("not-a-tree-head", `found ${found}; allowed is ${allowed}`);
}
