import { and, desc, eq, isNull, sql } from "drizzle-orm";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import { apiKeys, campaigns, memberships, user } from "./schema/tables";

export type ApiKeyState = "holds" | "expired" | "revoked";

export type ApiKeyRow = {
  id: string;
  /** Who made it, by the opaque id that stands in entries, and by name. */
  member: string;
  name: string | null;
  title: string;
  scopes: string[];
  begins: string;
  madeAt: string;
  expiresAt: string | null;
  /** To the hour. */
  lastUsedAt: string | null;
  revokedAt: string | null;
  state: ApiKeyState;
};

const state = sql<ApiKeyState>`case
  when ${apiKeys.revokedAt} is not null then 'revoked'
  when ${apiKeys.expiresAt} <= clock_timestamp() then 'expired'
  else 'holds' end`;

const columns = {
  id: apiKeys.id,
  member: apiKeys.member,
  name: user.name,
  title: apiKeys.title,
  scopes: apiKeys.scopes,
  begins: apiKeys.begins,
  madeAt: apiKeys.madeAt,
  expiresAt: apiKeys.expiresAt,
  lastUsedAt: apiKeys.lastUsedAt,
  revokedAt: apiKeys.revokedAt,
  state,
};

/** Puts a key on record by its digest: its text is nowhere here. */
export async function addApiKey(
  store: Store,
  campaign: string,
  key: Pick<ApiKeyRow, "id" | "member" | "title" | "scopes" | "begins" | "expiresAt"> & {
    hash: Uint8Array;
  },
): Promise<void> {
  const { id: campaignId } = await findCampaign(store, campaign, store.db);
  await store.db.insert(apiKeys).values({ campaignId, ...key });
}

/** All keys of a campaign, or one member's, the newest first; those that hold no more too. */
export async function listApiKeys(
  store: Store,
  { campaign, member }: { campaign: string; member: string | null },
): Promise<ApiKeyRow[]> {
  const { id } = await findCampaign(store, campaign, store.db);
  const theirs = member === null ? undefined : eq(apiKeys.member, member);
  return await store.db
    .select(columns)
    .from(apiKeys)
    .innerJoin(
      memberships,
      and(eq(memberships.campaignId, apiKeys.campaignId), eq(memberships.member, apiKeys.member)),
    )
    .leftJoin(user, eq(user.id, memberships.userId))
    .where(and(eq(apiKeys.campaignId, id), theirs))
    .orderBy(desc(apiKeys.madeAt), desc(apiKeys.id));
}

export type FoundApiKey = Pick<ApiKeyRow, "id" | "scopes" | "state"> & {
  userId: string;
  name: string;
};

/**
 * The key of that digest in that campaign, with the person for whom it acts: null where there is
 * none, or where its maker has no place in the campaign any more. Asked of the primary: what was
 * revoked a moment ago opens nothing.
 */
export async function findApiKey(
  store: Store,
  { campaign, hash }: { campaign: string; hash: Uint8Array },
): Promise<FoundApiKey | null> {
  const [found] = await store.db
    .select({ id: apiKeys.id, scopes: apiKeys.scopes, state, userId: user.id, name: user.name })
    .from(apiKeys)
    .innerJoin(campaigns, eq(campaigns.id, apiKeys.campaignId))
    .innerJoin(
      memberships,
      and(eq(memberships.campaignId, apiKeys.campaignId), eq(memberships.member, apiKeys.member)),
    )
    .innerJoin(user, eq(user.id, memberships.userId))
    .where(and(eq(campaigns.key, campaign), eq(apiKeys.hash, hash)));
  return found ?? null;
}

/** Notes that a key was used in this hour: one write an hour, however often it is used. */
export async function noteUse(
  store: Store,
  { campaign, id }: { campaign: string; id: string },
): Promise<void> {
  const hour = sql`date_trunc('hour', clock_timestamp())`;
  await store.db.execute(sql`
    update api_keys k set last_used_at = ${hour} from campaigns c
    where c.id = k.campaign_id and c.key = ${campaign} and k.id = ${id}
      and (k.last_used_at is null or k.last_used_at < ${hour})`);
}

/**
 * Ends a key.
 *
 * @param member whose it must be; null: anybody's
 * @returns whether there is such a key; one that was revoked before stays as it was
 */
export async function endApiKey(
  store: Store,
  key: { campaign: string; id: string; member: string | null; by: string },
): Promise<boolean> {
  const { id: campaignId } = await findCampaign(store, key.campaign, store.db);
  const theirs = key.member === null ? undefined : eq(apiKeys.member, key.member);
  const named = and(eq(apiKeys.campaignId, campaignId), eq(apiKeys.id, key.id), theirs);
  await store.db
    .update(apiKeys)
    .set({ revokedAt: sql`clock_timestamp()`, revokedBy: key.by })
    .where(and(named, isNull(apiKeys.revokedAt)));
  const there = await store.db.select({ id: apiKeys.id }).from(apiKeys).where(named);
  return there.length > 0;
}
