import { connect } from "@weighhouse/store/open-store";
import type { Store } from "@weighhouse/store/open-store";
import { SCORE_TASK } from "@weighhouse/store/scoring-queue";

/** First half of the advisory locks by which scorers show that they live. */
const SCORERS = 7_205_513;

/**
 * Marks this scorer as alive by a session lock, and frees the jobs of those whose lock is gone: a
 * scorer that was killed would else hold its job for four hours.
 */
export async function watchScorers(
  store: Store,
  { everyMs = 10_000 }: { everyMs?: number } = {},
): Promise<{ join(poolId: string): Promise<void>; leave(): Promise<void> }> {
  const sql = connect(store.url, 1);
  const own = new Set<string>();

  async function join(poolId: string): Promise<void> {
    own.add(poolId);
    // Taken again at every round: after a lost connection the session is another.
    await sql`select pg_try_advisory_lock(${SCORERS}, hashtext(${poolId}))`;
  }

  async function round(): Promise<void> {
    for (const poolId of own) await join(poolId);
    const holders = await sql<{ id: string }[]>`
      select distinct locked_by as id from graphile_worker.jobs where locked_by is not null`;
    for (const { id } of holders.filter((holder) => !own.has(holder.id))) {
      const [lock] = await sql<{ free: boolean }[]>`
        select pg_try_advisory_lock(${SCORERS}, hashtext(${id})) as free`;
      if (lock?.free !== true) continue;
      await freeJobs(sql, id);
      await sql`select pg_advisory_unlock(${SCORERS}, hashtext(${id}))`;
      store.log.warn({ scorer: id }, "freed the job of a scorer that is gone");
    }
  }

  const timer = setInterval(() => {
    round().catch((error: unknown) => store.log.warn({ error }, "could not look for lost scorers"));
  }, everyMs);
  await round();
  return {
    join,
    async leave() {
      clearInterval(timer);
      // The queue's stop can leave a job locked that it had just taken.
      for (const poolId of own) await freeJobs(sql, poolId);
      await sql.end({ timeout: 5 });
    },
  };
}

/** Gives back what a scorer holds; a job without a key was superseded by a newer one and is dropped. */
async function freeJobs(sql: Store["sql"], poolId: string): Promise<void> {
  await sql`select graphile_worker.force_unlock_workers(array[${poolId}]::text[])`;
  await sql`
    select graphile_worker.complete_jobs(array(
      select id from graphile_worker.jobs
      where task_identifier = ${SCORE_TASK} and key is null and locked_at is null
    ))`;
}
