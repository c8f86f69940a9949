import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";

/** The member who posted each of these measurements; null: the system, as of an import. */
export async function postersOf(
  store: Store,
  campaign: string,
  ids: readonly string[],
): Promise<Map<string, string | null>> {
  const { id } = await findCampaign(store, campaign);
  const rows = await store.sql<{ id: string; member: string | null }[]>`
    select distinct on (m.id) m.id, e.member
    from measurements m join entries e on e.campaign_id = m.campaign_id and e.seq = m.first_seq
    where m.campaign_id = ${id} and m.id = any(${ids as string[]}::text[])
    order by m.id, m.from_size`;
  return new Map(rows.map((row) => [row.id, row.member]));
}
