import type { Store } from "./open-store";

/** So many requests in so many seconds; all of them may come at once, and then evenly. */
export type RateLimit = { requests: number; seconds: number };

export type Turn = {
  allowed: boolean;
  /** How many more may come now. */
  remaining: number;
  /** Seconds until all may come again; for one that is refused, until the next may. */
  secondsToWait: number;
};

/**
 * Takes a turn for somebody, or says when to come again: the generic cell rate algorithm (ITU-T
 * I.371), which needs a single time of each, in a single statement, so that any number of processes
 * count together.
 */
export async function takeTurn(
  store: Store,
  subject: string,
  { requests, seconds }: RateLimit,
): Promise<Turn> {
  await forgetIdle(store);
  const gap = seconds / requests;
  const [taken] = await store.sql<{ ahead: number }[]>`
    insert into request_rates as r (subject, even_at)
    values (${subject}, clock_timestamp() + make_interval(secs => ${gap}))
    on conflict (subject) do update
      set even_at = greatest(r.even_at, clock_timestamp()) + make_interval(secs => ${gap})
      where greatest(r.even_at, clock_timestamp()) + make_interval(secs => ${gap})
        <= clock_timestamp() + make_interval(secs => ${seconds})
    returning extract(epoch from even_at - clock_timestamp())::float8 as ahead`;
  if (taken !== undefined) {
    const remaining = Math.max(0, Math.floor((seconds - taken.ahead) / gap));
    return { allowed: true, remaining, secondsToWait: Math.max(0, Math.ceil(taken.ahead)) };
  }
  const [full] = await store.sql<{ ahead: number }[]>`
    select extract(epoch from even_at - clock_timestamp())::float8 as ahead
    from request_rates where subject = ${subject}`;
  const wait = Math.ceil((full?.ahead ?? seconds) + gap - seconds);
  return { allowed: false, remaining: 0, secondsToWait: Math.max(1, wait) };
}

const FORGET_EVERY_MS = 60_000;
const forgotten = new WeakMap<Store["sql"], number>();

/** Whose requests are over has nothing to wait for: the row says no more than none would. */
async function forgetIdle({ sql }: Store): Promise<void> {
  const now = performance.now();
  if (now - (forgotten.get(sql) ?? -Infinity) < FORGET_EVERY_MS) return;
  forgotten.set(sql, now);
  await sql`
    delete from request_rates where subject in (
      select subject from request_rates where even_at < clock_timestamp() for update skip locked
    )`;
}
