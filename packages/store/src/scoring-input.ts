import type { PartContent, PartName } from "@weighhouse/campaign/parts";
import type { Measurement } from "@weighhouse/campaign/document";
import type { EntryKind } from "@weighhouse/campaign/entries";
import { documentFromParts } from "@weighhouse/campaign/fold";
import type { Part } from "@weighhouse/campaign/fold";
import { ledgerChangeOf, movingKinds } from "@weighhouse/campaign/ledger-changes";
import type { LedgerChange } from "@weighhouse/campaign/ledger-changes";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import type { TimelineStep } from "./standings";

/** A transaction of the ledger, as the scorer goes through them: entries [begin, size). */
export type Transaction = {
  begin: number;
  size: number;
  at: string;
  /** Root after it, base64. */
  treeHead: string;
  /** What it did; measurements posted with correlations are as anything else. */
  change: LedgerChange;
  /** null: it changed neither measurements nor hypotheses. */
  movedBy: TimelineStep["movedBy"] | null;
};

type Row = Omit<Transaction, "movedBy" | "change"> & {
  kinds: EntryKind[];
  correlates: boolean;
  seq: number | null;
  kind: string | null;
  facilities: string[];
  measurements: number;
};

/** What a measurement is completed by: its unit, and conditions from time. */
const COMPLETING = ["campaign", "observable", "measurand"];

/** The transactions after a size, in order, at most `limit` of them. */
export async function readTransactions(
  store: Store,
  { campaign, after, limit }: { campaign: string; after: number; limit: number },
): Promise<Transaction[]> {
  const { id } = await findCampaign(store, campaign, store.db);
  const rows = await store.sql<Row[]>`
    with bounds as (
      select lag(size, 1, ${after}::int) over (order by size) as begin, size, root, at
      from heads where campaign_id = ${id} and size > ${after}::int order by size limit ${limit}
    )
    select b.begin, b.size, b.at, encode(b.root, 'base64') as "treeHead", moving.seq, moving.kind,
      array(select distinct e.kind from entries e
        where e.campaign_id = ${id} and e.seq >= b.begin and e.seq < b.size) as kinds,
      exists (select 1 from parts p
        where p.campaign_id = ${id} and p.part = 'correlation'
          and p.from_size > b.begin and p.from_size <= b.size) as correlates,
      moved.facilities, moved.measurements
    from bounds b
    left join lateral (
      select e.seq, e.kind from entries e
      where e.campaign_id = ${id} and e.seq >= b.begin and e.seq < b.size
        and e.kind = any(${[...movingKinds]}::text[])
      order by e.seq limit 1
    ) moving on true
    cross join lateral (
      select count(distinct m.id)::int as measurements,
        coalesce(array_agg(distinct m.facility) filter (where m.facility is not null), '{}')
          as facilities
      from measurements m
      where m.campaign_id = ${id} and m.from_size > b.begin and m.from_size <= b.size
    ) moved
    order by b.size`;
  return rows.map(({ seq, kind, kinds, correlates, facilities, measurements, ...rest }) => ({
    ...rest,
    change: correlates ? "document" : ledgerChangeOf(kinds),
    movedBy: seq === null || kind === null ? null : { seq, kind, facilities, measurements },
  }));
}

/**
 * The measurements that entries [begin, size) posted, completed as in the document (unit, conditions
 * from time), without reading the others.
 */
export async function readPosted(
  store: Store,
  { campaign, begin, size }: { campaign: string; begin: number; size: number },
): Promise<Measurement[]> {
  const { id } = await findCampaign(store, campaign, store.db);
  const rows = await store.sql<ContentRow[]>`
    select id as key, content from measurements
    where campaign_id = ${id} and first_seq >= ${begin} and first_seq < ${size}
      and from_size = first_seq + 1
    order by first_seq, first_place`;
  return completed(store, { campaignId: id, size }, rows);
}

/** A measurement of the document of size `begin`, with its place in it, and what became of it. */
export type Revised = { place: number; before: Measurement; after: Measurement | null };

/** What entries [begin, size), which correct, set aside and withdraw, did to measurements that were there. */
export async function readRevised(
  store: Store,
  { campaign, begin, size }: { campaign: string; begin: number; size: number },
): Promise<Revised[]> {
  const { id } = await findCampaign(store, campaign, store.db);
  const rows = await store.sql<(ContentRow & { now: string; place: number })[]>`
    with there as (
      select id, content, (row_number() over (order by first_seq, first_place) - 1)::int as place
      from measurements
      where campaign_id = ${id} and from_size <= ${begin}
        and (to_size is null or to_size > ${begin}) and not withdrawn
    )
    select there.id as key, there.content, there.place, m.content as now
    from there join measurements m on m.id = there.id
    where m.campaign_id = ${id} and m.from_size > ${begin} and m.from_size <= ${size}
      and (m.to_size is null or m.to_size > ${size})
    order by there.place`;
  const campaignId = id;
  const before = await completed(store, { campaignId, size }, rows);
  const now = rows.map(({ key, now: content }) => ({ key, content }));
  // One that was withdrawn isn't in a document.
  const after = await completed(store, { campaignId, size }, now);
  const byId = new Map(after.map((measurement) => [measurement.id, measurement]));
  return before.map((measurement, i) => ({
    place: rows[i]!.place,
    before: measurement,
    after: byId.get(measurement.id) ?? null,
  }));
}

/** The measurements of some measurands, as the document of a size has them, in its order. */
export async function readMeasurementsOf(
  store: Store,
  { campaign, measurands, size }: { campaign: string; measurands: string[]; size: number },
): Promise<Measurement[]> {
  const { id } = await findCampaign(store, campaign, store.db);
  const rows = await store.sql<ContentRow[]>`
    select id as key, content from measurements
    where campaign_id = ${id} and measurand = any(${measurands}::text[]) and not withdrawn
      and from_size <= ${size} and (to_size is null or to_size > ${size})
    order by first_seq, first_place`;
  return completed(store, { campaignId: id, size }, rows);
}

type ContentRow = { key: string; content: string };

async function completed(
  store: Store,
  { campaignId, size }: { campaignId: number; size: number },
  measurements: ContentRow[],
): Promise<Measurement[]> {
  if (measurements.length === 0) return [];
  const completing = await store.sql<(ContentRow & { part: PartName })[]>`
    select part, key, content from parts
    where campaign_id = ${campaignId} and from_size <= ${size}
      and (to_size is null or to_size > ${size}) and part = any(${COMPLETING}::text[])
    order by first_seq, first_place`;
  const rows = [
    ...completing,
    ...measurements.map((row) => ({ part: "measurement" as const, ...row })),
  ];
  const parts = rows.map(({ part, key, content }): Part => ({
    part,
    key,
    content: JSON.parse(content) as PartContent,
  }));
  return documentFromParts(parts).measurements;
}
