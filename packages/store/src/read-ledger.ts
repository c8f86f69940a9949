import { base64 } from "@weighhouse/ledger/bytes";
import type { Entry } from "@weighhouse/ledger/entry";
import { and, asc, desc, eq, gte, lt, lte } from "drizzle-orm";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import { entries, heads, nodes, signingKeys } from "./schema/tables";
import { StoreError } from "./store-error";

/** An entry and its payload's canonical text. */
export type StoredEntry = { entry: Entry; payload: string };
/** A signed head; `root` is base64, as in the note. */
export type StoredHead = { size: number; root: string; note: string; at: string };

export const ENTRIES_PER_PAGE = 1000;

/** Entries [from, to), at most 1,000 at a time; a range past the end is cut there. */
export async function readEntries(
  store: Store,
  { campaign, from, to }: { campaign: string; from: number; to: number },
): Promise<StoredEntry[]> {
  const { id } = await findCampaign(store, campaign);
  const rows = await store.readDb
    .select()
    .from(entries)
    .where(and(eq(entries.campaignId, id), gte(entries.seq, from), lt(entries.seq, to)))
    .orderBy(asc(entries.seq))
    .limit(ENTRIES_PER_PAGE);
  return rows.map((row) => storedEntry(campaign, row));
}

/** @throws {StoreError} `no-such-entry` */
export async function readEntry(
  store: Store,
  { campaign, seq }: { campaign: string; seq: number },
): Promise<StoredEntry> {
  const [found] = await readEntries(store, { campaign, from: seq, to: seq + 1 });
  if (found === undefined) {
    throw new StoreError("no-such-entry", `found no entry ${seq} in ${campaign}`);
  }
  return found;
}

/** All entries [0, size) in order, without holding them all. */
export async function* streamEntries(
  store: Store,
  { campaign, size }: { campaign: string; size?: number },
): AsyncGenerator<StoredEntry> {
  const end = size ?? (await findCampaign(store, campaign)).size;
  for (let from = 0; from < end; from += ENTRIES_PER_PAGE) {
    const to = Math.min(from + ENTRIES_PER_PAGE, end);
    yield* await readEntries(store, { campaign, from, to });
  }
}

/** The reader of stored nodes from which inclusion and consistency proofs are made. */
export async function nodeReader(
  store: Store,
  campaign: string,
): Promise<(level: number, index: number) => Promise<Uint8Array>> {
  const { id } = await findCampaign(store, campaign);
  return async (level, index) => {
    const [row] = await store.readDb
      .select({ hash: nodes.hash })
      .from(nodes)
      .where(and(eq(nodes.campaignId, id), eq(nodes.level, level), eq(nodes.index, index)));
    if (row === undefined) {
      throw new StoreError("ledger-broken", `${campaign}: no node ${index} of level ${level}`);
    }
    return row.hash;
  };
}

/** The signed heads up to a size, in order. */
export async function readHeads(
  store: Store,
  { campaign, size }: { campaign: string; size?: number },
): Promise<StoredHead[]> {
  const { id, size: latest } = await findCampaign(store, campaign);
  const rows = await store.readDb
    .select()
    .from(heads)
    .where(and(eq(heads.campaignId, id), lte(heads.size, size ?? latest)))
    .orderBy(asc(heads.size));
  return rows.map(storedHead);
}

/** The latest signed head. */
export async function readLatestHead(store: Store, campaign: string): Promise<StoredHead> {
  const { id } = await findCampaign(store, campaign);
  const [row] = await store.readDb
    .select()
    .from(heads)
    .where(eq(heads.campaignId, id))
    .orderBy(desc(heads.size))
    .limit(1);
  if (row === undefined) throw new StoreError("ledger-broken", `${campaign}: no signed head`);
  return storedHead(row);
}

/** Verifier keys (C2SP) of every key that has signed heads here, oldest first. */
export async function readSigningKeys(store: Store): Promise<string[]> {
  const rows = await store.readDb.select().from(signingKeys).orderBy(asc(signingKeys.addedAt));
  return rows.map((row) => row.verifierKey);
}

function storedEntry(campaign: string, row: typeof entries.$inferSelect): StoredEntry {
  const { seq, at, member, team, kind, payload, payloadSha256 } = row;
  const by: Entry["by"] = member === null ? { system: true } : { member, team };
  return { entry: { v: 1, campaign, seq, at, by, kind, payloadSha256 }, payload };
}

function storedHead({ size, root, note, at }: typeof heads.$inferSelect): StoredHead {
  return { size, root: base64(root), note, at };
}
