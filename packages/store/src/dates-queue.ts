import type { Payload } from "@weighhouse/campaign/entries";
import type { Store } from "./open-store";
import type { PreparedPayload } from "./prepare-payload";
import type { Queries } from "./queries";

/** Does what a campaign's dates ask for: closes registration, opens held seals, cites standings. */
export const DATES_TASK = "keep-dates";

/** A job for each date that an entry sets; one that lies in the past runs at once. */
export function queueDates(
  sql: Queries,
  campaign: string,
  payloads: PreparedPayload[],
): Promise<unknown>[] {
  const dates = new Set(payloads.flatMap(datesOf));
  return [...dates].map(
    (date) => sql`
      select graphile_worker.add_job(${DATES_TASK}, ${JSON.stringify({ campaign })}::text::json,
        run_at => ${date}::text::timestamptz, job_key => ${`dates:${campaign}:${date}`},
        max_attempts => 10)`,
  );
}

function datesOf({ kind, value }: PreparedPayload): string[] {
  if (kind === "campaign.opened" || kind === "campaign.amended") {
    const { registrationCloses, dataCloses } = value as Payload<"campaign.amended">;
    return [registrationCloses, dataCloses].filter((date) => date !== null);
  }
  if (kind === "prediction.sealed" || kind === "measurement.sealed") {
    const { keeping, until } = value as Payload<"measurement.sealed">;
    return keeping === "held" ? [until] : [];
  }
  return [];
}

/**
 * Queues every campaign with something overdue, whose job is lost or was given up: asked at a
 * start, and now and then.
 */
export async function queueOverdue(store: Store): Promise<string[]> {
  const rows = await store.sql<{ key: string }[]>`
    select c.key from campaigns c
    where exists (
      select 1 from parts p
      where p.campaign_id = c.id and p.part = 'campaign' and p.to_size is null
        and p.content->>'registrationClosed' is null
        and (p.content->>'registrationCloses')::timestamptz <= clock_timestamp()
    ) or exists (
      select 1 from parts p
      where p.campaign_id = c.id and p.part = 'campaign' and p.to_size is null
        and (p.content->>'dataCloses')::timestamptz <= clock_timestamp()
        and (p.content->>'dataCloses')::timestamptz > (select e.at from entries e
          where e.campaign_id = c.id and e.seq = 0)
        and not exists (select 1 from parts q
          where q.campaign_id = c.id and q.part = 'citation' and q.content->>'by' = 'clock')
    ) or exists (
      select 1 from parts p
      where p.campaign_id = c.id and p.part = 'seal' and p.to_size is null
        and p.content->>'keeping' = 'held' and p.content->>'revealed' is null
        and (p.content->>'until')::timestamptz <= clock_timestamp()
    ) order by c.key`;
  for (const { key } of rows) {
    await store.sql`
      select graphile_worker.add_job(${DATES_TASK}, ${JSON.stringify({ campaign: key })}::text::json,
        job_key => ${`dates:${key}`}, max_attempts => 10)`;
  }
  return rows.map(({ key }) => key);
}
