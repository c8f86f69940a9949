import { payloadDigest, payloadText, leafHash } from "@weighhouse/ledger/entry";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { appendLeaf, emptyEdge, rootOf } from "@weighhouse/ledger/tree";
import { formatTreeHead, signTreeHead } from "@weighhouse/ledger/tree-head";
import type { TreeHeadSigner } from "@weighhouse/ledger/tree-head";
import postgres from "postgres";
import type { Store } from "../open-store";
import { readHeads, streamEntries } from "../read-ledger";

/**
 * Does what a forger could who owns the database and holds the key: changes one entry's payload and
 * makes payload digests, tree and signed heads anew, triggers out of the way.
 */
export async function rewriteLedger(
  store: Store,
  as: { adminUrl: string; signer: TreeHeadSigner },
  change: { campaign: string; seq: number; payload: unknown },
): Promise<void> {
  const { campaign, seq } = change;
  const admin = postgres(as.adminUrl, { max: 1, onnotice: () => {} });
  const text = payloadText(change.payload);
  const sha256 = payloadDigest(nodeHasher, text);
  const heads = new Map((await readHeads(store, { campaign })).map((head) => [head.size, head]));
  try {
    const [row] = await admin<{ id: number; ledger: string }[]>`
      select id, ledger from campaigns where key = ${campaign}`;
    const { id, ledger } = row!;
    for (const table of ["entries", "nodes", "heads"]) {
      await admin`alter table ${admin(table)} disable trigger all`;
    }
    await admin`
      update entries set payload = ${text}, payload_sha256 = ${sha256}
      where campaign_id = ${id} and seq = ${seq}`;
    let edge = emptyEdge();
    for await (const { entry } of streamEntries(store, { campaign })) {
      const grown = appendLeaf(nodeHasher, edge, leafHash(nodeHasher, entry));
      edge = grown.edge;
      for (const { level, index, hash } of grown.nodes) {
        await admin`
          update nodes set hash = ${Buffer.from(hash)}
          where campaign_id = ${id} and level = ${level} and index = ${index}`;
      }
      if (!heads.has(edge.size)) continue;
      const root = rootOf(nodeHasher, edge);
      const head = formatTreeHead({ origin: ledger, size: edge.size, root });
      await admin`
        update heads set root = ${Buffer.from(root)}, note = ${signTreeHead(head, as.signer)}
        where campaign_id = ${id} and size = ${edge.size}`;
    }
    await admin`
      update tips set edge = ${Buffer.concat(edge.hashes)} where campaign_id = ${id}`;
  } finally {
    await admin.end();
  }
}
