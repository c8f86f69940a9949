import { and, asc, eq } from "drizzle-orm";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import { rememberedMatches } from "./schema/tables";

/** `columns` is the digest of a table's column names; `choices` JSON. */
export type RememberedMatch = {
  facility: string;
  columns: string;
  choices: string;
  rememberedAt: string;
};

/** A facility changes its tables now and then; past this many layouts the oldest is forgotten. */
const MOST_PER_FACILITY = 100;

/** Keeps what was chosen for a facility's tables with these columns, in place of what was before. */
export async function keepMatch(
  store: Store,
  campaign: string,
  { facility, columns, choices }: Omit<RememberedMatch, "rememberedAt">,
): Promise<void> {
  const { id } = await findCampaign(store, campaign);
  await store.sql.begin(async (tx) => {
    await tx`
      insert into remembered_matches (campaign_id, facility, columns, choices)
      values (${id}, ${facility}, ${columns}, ${choices}::text::json)
      on conflict (campaign_id, facility, columns)
      do update set choices = excluded.choices, remembered_at = now()`;
    await tx`
      delete from remembered_matches m
      where m.campaign_id = ${id} and m.facility = ${facility} and m.columns in (
        select columns from remembered_matches
        where campaign_id = ${id} and facility = ${facility}
        order by remembered_at desc, columns offset ${MOST_PER_FACILITY}
      )`;
  });
}

/** What is remembered of tables with these columns, by facility. */
export async function findMatches(
  store: Store,
  campaign: string,
  columns: string,
): Promise<RememberedMatch[]> {
  const { id } = await findCampaign(store, campaign, store.db);
  const rows = await store.db
    .select()
    .from(rememberedMatches)
    .where(and(eq(rememberedMatches.campaignId, id), eq(rememberedMatches.columns, columns)))
    .orderBy(asc(rememberedMatches.facility));
  return rows.map(({ facility, choices, rememberedAt }) => ({
    facility,
    columns,
    choices,
    rememberedAt,
  }));
}

/** Forgets one; whether there was one. */
export async function dropMatch(
  store: Store,
  campaign: string,
  { facility, columns }: Pick<RememberedMatch, "facility" | "columns">,
): Promise<boolean> {
  const { id } = await findCampaign(store, campaign);
  const { count } = await store.sql`
    delete from remembered_matches
    where campaign_id = ${id} and facility = ${facility} and columns = ${columns}`;
  return count > 0;
}
