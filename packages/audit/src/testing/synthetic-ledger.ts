import { ed25519 } from "@noble/curves/ed25519.js";
import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { EntryKind } from "@weighhouse/campaign/entries";
import { readPayload } from "@weighhouse/campaign/payloads";
import { leafHash, payloadDigest, payloadText } from "@weighhouse/ledger/entry";
import type { Entry } from "@weighhouse/ledger/entry";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import type { NoteSigner } from "@weighhouse/ledger/signed-note";
import { appendLeaf, emptyEdge, rootOf } from "@weighhouse/ledger/tree";
import { formatTreeHead, signTreeHead } from "@weighhouse/ledger/tree-head";
import { encodeVerifierKey, verifierKey } from "@weighhouse/ledger/verifier-key";

export type Posting = { kind: EntryKind; payload: unknown };

export type SyntheticLedger = {
  entries: Entry[];
  payloads: string[];
  heads: string[];
  keys: string[];
  records: LedgerRecord[];
};

/** A signer with a fixed key: the same archive on every run. */
export function fixedSigner(name: string, byte: number): NoteSigner {
  const secret = new Uint8Array(32).fill(byte);
  return {
    ...verifierKey(name, ed25519.getPublicKey(secret)),
    sign: (bytes) => ed25519.sign(bytes, secret),
  };
}

/**
 * A ledger of transactions, as the store would append them: defaults written out, one signed head
 * each. An hour passes between transactions, a microsecond between the entries of one.
 */
export function appendTransactions(
  campaign: string,
  ledger: string,
  transactions: readonly (readonly Posting[])[],
  signer: NoteSigner,
): SyntheticLedger {
  const entries: Entry[] = [];
  const payloads: string[] = [];
  const heads: string[] = [];
  const records: LedgerRecord[] = [];
  let edge = emptyEdge();
  for (const [hour, postings] of transactions.entries()) {
    for (const [index, { kind, payload }] of postings.entries()) {
      const read = readPayload(kind, payload);
      if (!read.ok) throw new Error(`${kind}: ${JSON.stringify(read.problems)}`);
      const text = payloadText(read.value);
      const entry: Entry = {
        v: 1,
        campaign,
        seq: entries.length,
        at: instant(hour, index),
        by: { member: "m-1", team: null },
        kind,
        payloadSha256: payloadDigest(nodeHasher, text),
      };
      entries.push(entry);
      payloads.push(text);
      records.push({ seq: entry.seq, at: entry.at, by: entry.by, kind, payload: read.value });
      edge = appendLeaf(nodeHasher, edge, leafHash(nodeHasher, entry)).edge;
    }
    const head = { origin: ledger, size: edge.size, root: rootOf(nodeHasher, edge) };
    heads.push(signTreeHead(formatTreeHead(head), signer));
  }
  return { entries, payloads, heads, keys: [encodeVerifierKey(signer)], records };
}

function instant(hour: number, microsecond: number): string {
  const time = new Date(Date.UTC(2031, 1, 1, hour)).toISOString();
  return `${time.slice(0, 19)}.${String(microsecond).padStart(6, "0")}Z`;
}
