import { and, asc, eq, lte } from "drizzle-orm";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import { timeStamps } from "./schema/tables";

/** Asks a time-stamp authority about one head. */
export const TIME_STAMP_TASK = "time-stamp-head";

/** A head that should have a time-stamp, and has none yet. */
export type MissingTimeStamp = {
  campaign: string;
  size: number;
  because: "registration" | "citation" | "daily";
};

export type StoredTimeStamp = { size: number; token: Uint8Array; at: string; authority: string };

/**
 * The heads that a time-stamp is missing of: the one that closed registration, that of each citation,
 * and the newest of a ledger whose last time-stamp is a day old.
 *
 * @param campaign of that one alone, else of all
 */
export async function missingTimeStamps(
  store: Store,
  campaign: string | null = null,
): Promise<MissingTimeStamp[]> {
  return store.sql<MissingTimeStamp[]>`
    with wanted as (
      select p.campaign_id, min(p.from_size) as past, 'registration' as because from parts p
      where p.part = 'campaign' and p.content->>'registrationClosed' is not null
      group by p.campaign_id
      union all
      select p.campaign_id, p.from_size, 'citation' from parts p where p.part = 'citation'
      union all
      select t.campaign_id, t.size, 'daily' from tips t
      where not exists (
        select 1 from time_stamps s where s.campaign_id = t.campaign_id
          and (s.size = t.size or s.at > clock_timestamp() - interval '1 day')
      )
    ), headed as (
      select w.campaign_id, w.because, (
        select h.size from heads h
        where h.campaign_id = w.campaign_id and h.size >= w.past order by h.size limit 1
      ) as size from wanted w
    )
    select distinct on (c.key, h.size) c.key as campaign, h.size, h.because
    from headed h join campaigns c on c.id = h.campaign_id
    where (${campaign}::text is null or c.key = ${campaign}) and not exists (
      select 1 from time_stamps s where s.campaign_id = h.campaign_id and s.size = h.size
    )
    order by c.key, h.size, h.because desc`;
}

/** A job for each missing time-stamp; tried again for about a week where the authority doesn't answer. */
export async function queueTimeStamps(store: Store): Promise<MissingTimeStamp[]> {
  const missing = await missingTimeStamps(store);
  for (const { campaign, size } of missing) {
    await store.sql`
      select graphile_worker.add_job(${TIME_STAMP_TASK},
        ${JSON.stringify({ campaign, size })}::text::json,
        job_key => ${`time-stamp:${campaign}:${size}`}, job_key_mode => 'preserve_run_at',
        max_attempts => 20)`;
  }
  return missing;
}

/** Keeps a verified token; where another process was faster, its stays. */
export async function keepTimeStamp(
  store: Store,
  campaign: string,
  { size, token, at, authority }: StoredTimeStamp,
): Promise<void> {
  const { id } = await findCampaign(store, campaign);
  await store.sql`
    insert into time_stamps (campaign_id, size, token, at, authority)
    values (${id}, ${size}, ${Buffer.from(token)}, ${at}, ${authority})
    on conflict do nothing`;
}

/** Time-stamps of heads up to a size, in order. */
export async function readTimeStamps(
  store: Store,
  { campaign, size }: { campaign: string; size: number },
): Promise<StoredTimeStamp[]> {
  const { id } = await findCampaign(store, campaign);
  const rows = await store.readDb
    .select()
    .from(timeStamps)
    .where(and(eq(timeStamps.campaignId, id), lte(timeStamps.size, size)))
    .orderBy(asc(timeStamps.size));
  return rows.map(({ size: of, token, at, authority }) => ({ size: of, token, at, authority }));
}
