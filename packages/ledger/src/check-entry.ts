import { fromBase64, sameBytes } from "./bytes";
import { leafHash, payloadDigest } from "./entry";
import type { Entry } from "./entry";
import { nobleHasher } from "./noble-hasher";
import { verifyInclusion } from "./proof";
import { verifyTreeHead } from "./tree-head";
import { decodeVerifierKey, fingerprint } from "./verifier-key";

/** All that is needed to check one entry against a signed tree head. */
export interface EntryEvidence {
  entry: Entry;
  /** The canonical text that `payloadSha256` is of. */
  payload: string;
  head: { size: number; root: string; note: string };
  /** Hexadecimal, from the leaf up. */
  proof: readonly string[];
  keys: readonly string[];
}

export interface CheckLine {
  check: string;
  ok: boolean;
  detail: string;
}

/**
 * Recomputes, from the entry and its content up to the signed head: the content's digest, the
 * leaf's way to the root (RFC 9162 section 2.1.3.2), the head's signature (C2SP signed note).
 */
export function checkEntry(evidence: EntryEvidence): CheckLine[] {
  return [checkContent(evidence), checkInclusion(evidence), ...checkHead(evidence)];
}

function checkContent({ entry, payload }: EntryEvidence): CheckLine {
  const found = payloadDigest(nobleHasher, payload);
  const ok = found === entry.payloadSha256;
  return {
    check: "the content is what the entry says",
    ok,
    detail: ok
      ? `SHA-256 ${found}`
      : `found SHA-256 ${found}; the entry says ${entry.payloadSha256}`,
  };
}

function checkInclusion({ entry, head, proof }: EntryEvidence): CheckLine {
  const root = fromBase64(head.root);
  const steps = proof.map(bytesOfHex);
  const check = "the entry is in the ledger";
  if (root === null || steps.includes(null)) {
    return { check, ok: false, detail: "the proof or the root is not well formed" };
  }
  const outcome = verifyInclusion(nobleHasher, {
    index: entry.seq,
    size: head.size,
    leafHash: leafHash(nobleHasher, entry),
    proof: steps.filter((step) => step !== null),
    root,
  });
  return {
    check,
    ok: outcome.ok,
    detail: outcome.ok
      ? `${steps.length} hashes lead from the leaf to the root of ${head.size} entries`
      : outcome.reason,
  };
}

function checkHead({ head, keys }: EntryEvidence): CheckLine[] {
  const outcome = verifyTreeHead(head.note, keys.map(decodeVerifierKey));
  if (!outcome.ok) {
    return [{ check: "the head is signed", ok: false, detail: outcome.detail }];
  }
  const root = fromBase64(head.root);
  const same =
    root !== null && sameBytes(root, outcome.head.root) && outcome.head.size === head.size;
  const signers = outcome.signedBy.map((key) => fingerprint(key.publicKey)).join(", ");
  return [
    {
      check: "the root is the one that was signed",
      ok: same,
      detail: same ? head.root : "the signed head names another root or size",
    },
    { check: "the head is signed", ok: true, detail: `by the key with fingerprint ${signers}` },
  ];
}

function bytesOfHex(text: string): Uint8Array | null {
  if (!/^([0-9a-f]{2})*$/.test(text)) return null;
  return Uint8Array.from(text.match(/../g) ?? [], (pair) => Number.parseInt(pair, 16));
}
