import { base64 } from "@weighhouse/ledger/bytes";
import { leafHash } from "@weighhouse/ledger/entry";
import type { Entry } from "@weighhouse/ledger/entry";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { appendLeaf, rootOf } from "@weighhouse/ledger/tree";
import type { Edge, TreeNode } from "@weighhouse/ledger/tree";
import { formatTreeHead, signTreeHead } from "@weighhouse/ledger/tree-head";
import type { Queries } from "./queries";
import type { Clock } from "./clock";
import { instantOfMicros, microsOfInstant } from "./instant";
import type { Tip } from "./lock-tip";
import type { Store } from "./open-store";
import type { PreparedPayload } from "./prepare-payload";
import { StoreError } from "./store-error";

export type WriteInput = {
  tip: Tip;
  by: Entry["by"];
  payloads: PreparedPayload[];
  clock: Clock | undefined;
};

export type Extended = {
  entries: Entry[];
  size: number;
  /** Base64. */
  treeHead: string;
  note: string;
  /** Sends the statements that write it; each must succeed. */
  write(tx: Queries): Promise<unknown>[];
  /** The same without the entries themselves, for who brings them another way. */
  writeTree(tx: Queries): Promise<unknown>[];
};

/** Gives entries their time and place, appends their leaves and signs the head. Nothing is written. */
export function extendLedger(store: Store, input: WriteInput): Extended {
  if (store.signer === null) {
    throw new StoreError("no-signer", "this process holds no signing key, so it can't append");
  }
  const { tip, by, payloads } = input;
  const times = timesOf(input);
  const nodes: TreeNode[] = [];
  let edge: Edge = tip.edge;
  const entries = payloads.map(({ kind, sha256 }, index): Entry => {
    const at = times[index] as string;
    const seq = tip.size + index;
    const entry: Entry = { v: 1, campaign: tip.campaign, seq, at, by, kind, payloadSha256: sha256 };
    const appended = appendLeaf(nodeHasher, edge, leafHash(nodeHasher, entry));
    edge = appended.edge;
    nodes.push(...appended.nodes);
    return entry;
  });
  const root = rootOf(nodeHasher, edge);
  const head = formatTreeHead({ origin: tip.ledger, size: edge.size, root });
  const note = signTreeHead(head, store.signer);
  const at = times.at(-1) as string;
  const writeTree = (tx: Queries) => [
    insertNodes(tx, tip, nodes),
    tx`
      insert into heads (campaign_id, size, root, note, at)
      values (${tip.campaignId}, ${edge.size}, ${Buffer.from(root)}, ${note}, ${at})`,
    tx`
      update tips set size = ${edge.size}, edge = ${Buffer.concat(edge.hashes)}, last_at = ${at}
      where campaign_id = ${tip.campaignId}`,
  ];
  return {
    entries,
    size: edge.size,
    treeHead: base64(root),
    note,
    write: (tx) => [insertEntries(tx, tip, entries, payloads), ...writeTree(tx)],
    writeTree,
  };
}

/** One time per entry, each after the last: a clock that stands or goes back is held to that. */
function timesOf({ tip, payloads, clock }: WriteInput): string[] {
  if (payloads.length === 0) throw new RangeError("found no entries to append");
  if (clock !== undefined && tip.clock !== "simulated") {
    throw new StoreError(
      "clock-not-simulated",
      `found a clock for the campaign ${tip.campaign}; allowed is the database's, as its entry 0 says`,
    );
  }
  let last = tip.lastAt;
  return payloads.map(() => {
    const now = clock === undefined ? tip.now : microsOfInstant(clock());
    last = now > last ? now : last + 1n;
    return instantOfMicros(last);
  });
}

function insertEntries(
  tx: Queries,
  { campaignId }: Tip,
  entries: Entry[],
  payloads: PreparedPayload[],
): Promise<unknown> {
  const by = entries[0]?.by;
  const author = by === undefined || "system" in by ? { member: null, team: null } : by;
  return tx`
    insert into entries
      (campaign_id, seq, version, at, member, team, kind, payload, payload_sha256)
    select ${campaignId}::int, seq, 1, at, ${author.member}::text, ${author.team}::text, kind,
      payload, sha256
    from unnest(
      ${entries.map((entry) => entry.seq)}::int[], ${entries.map((entry) => entry.at)}::timestamptz[],
      ${entries.map((entry) => entry.kind)}::text[], ${payloads.map(({ text }) => text)}::text[],
      ${payloads.map(({ sha256 }) => sha256)}::text[]
    ) as e(seq, at, kind, payload, sha256)`;
}

function insertNodes(tx: Queries, { campaignId }: Tip, nodes: TreeNode[]): Promise<unknown> {
  return tx`
    insert into nodes (campaign_id, level, index, hash)
    select ${campaignId}::int, level, index, decode(hash, 'hex')
    from unnest(
      ${nodes.map((node) => node.level)}::smallint[], ${nodes.map((node) => node.index)}::int[],
      ${nodes.map((node) => Buffer.from(node.hash).toString("hex"))}::text[]
    ) as n(level, index, hash)`;
}
