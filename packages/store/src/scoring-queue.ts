import type { Queries } from "./queries";

export const SCORE_TASK = "score-campaign";

/** One job per campaign: a burst of postings is one scoring, and the latest size is what it scores. */
export function queueScoring(sql: Queries, campaign: string): Promise<unknown> {
  return sql`
    select graphile_worker.add_job(${SCORE_TASK}, ${JSON.stringify({ campaign })}::text::json,
      job_key => ${`score:${campaign}`}, max_attempts => 10)`;
}
