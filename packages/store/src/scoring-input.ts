import type { PartContent, PartName } from "@weighhouse/campaign/parts";
import type { Measurement } from "@weighhouse/campaign/document";
import { documentFromParts } from "@weighhouse/campaign/fold";
import type { Part } from "@weighhouse/campaign/fold";
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
  /** It posted measurements without correlations and did nothing else. */
  onlyMeasurements: boolean;
  /** null: it changed neither measurements nor hypotheses. */
  movedBy: TimelineStep["movedBy"] | null;
};

type Row = Omit<Transaction, "movedBy"> & {
  seq: number | null;
  kind: string | null;
  facilities: string[];
  measurements: number;
};

/** Entries of these kinds can move standings by changing measurements or hypotheses. */
const MOVING = [
  "measurements.posted",
  "measurement.set-aside",
  "measurement.corrected",
  "measurements.withdrawn",
  "measurement.revealed",
  "measurand.closed",
  "hypothesis.registered",
  "hypothesis.amended",
  "prediction.sealed",
  "prediction.revealed",
];

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
      (select bool_and(e.kind = 'measurements.posted') from entries e
        where e.campaign_id = ${id} and e.seq >= b.begin and e.seq < b.size)
      and not exists (select 1 from parts p
        where p.campaign_id = ${id} and p.part = 'correlation'
          and p.from_size > b.begin and p.from_size <= b.size) as "onlyMeasurements",
      moved.facilities, moved.measurements
    from bounds b
    left join lateral (
      select e.seq, e.kind from entries e
      where e.campaign_id = ${id} and e.seq >= b.begin and e.seq < b.size
        and e.kind = any(${MOVING}::text[])
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
  return rows.map(({ seq, kind, facilities, measurements, ...rest }) => ({
    ...rest,
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
  const rows = await store.sql<{ part: PartName; key: string; content: string }[]>`
    select part, key, content from (
      select part, key, content, first_seq, first_place from parts
      where campaign_id = ${id} and from_size <= ${size} and (to_size is null or to_size > ${size})
        and part = any(${COMPLETING}::text[])
      union all
      select 'measurement', id, content, first_seq, first_place from measurements
      where campaign_id = ${id} and first_seq >= ${begin} and first_seq < ${size}
        and from_size = first_seq + 1
    ) wanted order by first_seq, first_place`;
  const parts = rows.map(({ part, key, content }): Part => ({
    part,
    key,
    content: JSON.parse(content) as PartContent,
  }));
  return documentFromParts(parts).measurements;
}
