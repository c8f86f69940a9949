import type { Store } from "./open-store";
import type { Queries } from "./queries";

export const SCORE_TASK = "score-campaign";

/** One job per campaign: a burst of postings is one scoring, and the latest size is what it scores. */
export function queueScoring(sql: Queries, campaign: string): Promise<unknown> {
  return sql`
    select graphile_worker.add_job(${SCORE_TASK}, ${JSON.stringify({ campaign })}::text::json,
      job_key => ${`score:${campaign}`}, max_attempts => 10)`;
}

/** Queues every campaign whose latest size that engine has not scored: after a new version, too. */
export async function queueUnscored(store: Store, engine: string): Promise<string[]> {
  const rows = await store.sql<{ key: string }[]>`
    select c.key from campaigns c join tips t on t.campaign_id = c.id
    where not exists (
      select 1 from standings s
      where s.campaign_id = c.id and s.engine = ${engine} and s.size = t.size
    ) order by c.key`;
  for (const { key } of rows) await queueScoring(store.sql, key);
  return rows.map(({ key }) => key);
}
