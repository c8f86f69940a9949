import { CHANNEL } from "./append";
import { connect } from "./open-store";
import type { Store } from "./open-store";

export type StoreEvent = { campaign: string; size: number; what: "appended" | "scored" };

/**
 * Calls back for every append and scoring, on a LISTEN connection of its own. Resolves once it
 * listens. After a lost connection it listens again and tells every campaign's latest sizes, since
 * what was said meanwhile is lost.
 */
export async function listen(
  store: Store,
  callback: (event: StoreEvent) => void,
): Promise<() => Promise<void>> {
  const sql = connect(store.url, 1);
  let times = 0;
  await sql.listen(
    CHANNEL,
    (text) => callback(JSON.parse(text) as StoreEvent),
    () => {
      times += 1;
      if (times > 1) void tellLatest(store, callback);
    },
  );
  return () => sql.end({ timeout: 5 });
}

async function tellLatest(store: Store, callback: (event: StoreEvent) => void): Promise<void> {
  try {
    const events = await store.sql<StoreEvent[]>`
      select c.key as campaign, t.size, 'appended' as what
      from campaigns c join tips t on t.campaign_id = c.id
      union all
      select c.key, max(s.size), 'scored'
      from campaigns c join standings s on s.campaign_id = c.id group by c.key`;
    for (const event of events) callback({ ...event });
  } catch (error) {
    store.log.warn({ error }, "could not read what was missed while the listener was away");
  }
}
