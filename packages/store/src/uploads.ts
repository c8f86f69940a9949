import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import { StoreError } from "./store-error";

/** What is staged together, and posted or given up together. */
export type Upload = { campaignId: number; campaign: string; upload: string };

export type StagedPart = { part: number; sha256: string; rows: number; bytes: number };

/** Opens an upload for a member; what has passed its day is cleared away on the way. */
export async function openUpload(
  store: Store,
  { campaign, member }: { campaign: string; member: string },
): Promise<Upload & { expiresAt: string }> {
  const { id } = await findCampaign(store, campaign, store.db);
  await clearExpired(store);
  const [row] = await store.sql<{ upload: string; expiresAt: string }[]>`
    insert into uploads (campaign_id, member) values (${id}, ${member})
    returning upload, expires_at as "expiresAt"`;
  return { campaignId: id, campaign, ...row! };
}

/** @throws {StoreError} `no-such-upload`, also for another member's and one past its day */
export async function findUpload(
  store: Store,
  asked: { campaign: string; upload: string; member: string },
): Promise<Upload & { expiresAt: string; parts: StagedPart[] }> {
  const { campaign, upload, member } = asked;
  const { id } = await findCampaign(store, campaign, store.db);
  const [row] = await store.sql<{ expiresAt: string }[]>`
    select expires_at as "expiresAt" from uploads
    where campaign_id = ${id} and upload = ${upload}::uuid and member = ${member}
      and expires_at > clock_timestamp()`;
  if (row === undefined) {
    throw new StoreError(
      "no-such-upload",
      `found no upload ${upload}; allowed are your own of a day`,
    );
  }
  const parts = await store.sql<(Omit<StagedPart, "bytes"> & { bytes: string })[]>`
    select part, sha256, rows, bytes from staged_parts
    where campaign_id = ${id} and upload = ${upload}::uuid order by part`;
  return {
    campaignId: id,
    campaign,
    upload,
    ...row,
    parts: parts.map((part) => ({ ...part, bytes: Number(part.bytes) })),
  };
}

/** Notes that a part is there as a whole. */
export async function keepPart(store: Store, to: Upload, part: StagedPart): Promise<void> {
  await store.sql`
    insert into staged_parts (campaign_id, upload, part, sha256, rows, bytes)
    values (${to.campaignId}, ${to.upload}, ${part.part}, ${part.sha256}, ${part.rows},
      ${part.bytes})`;
}

const stagedTables = [
  "staged_parts",
  "staged_fates",
  "staged_entries",
  "staged_measurements",
] as const;

/** Takes a part back, whether it is there as a whole or was broken off. */
export async function clearPart(store: Store, of: Upload, part: number): Promise<void> {
  const { campaignId, upload } = of;
  for (const table of stagedTables) {
    await store.sql`
      delete from ${store.sql(table)}
      where campaign_id = ${campaignId} and upload = ${upload} and part = ${part}`;
  }
}

/** The upload's row goes last: one that is broken off here is found again once its day has passed. */
export async function clearUpload(store: Store, { campaignId, upload }: Upload): Promise<void> {
  for (const table of [...stagedTables, "uploads"]) {
    await store.sql`
      delete from ${store.sql(table)} where campaign_id = ${campaignId} and upload = ${upload}`;
  }
}

async function clearExpired(store: Store): Promise<void> {
  const expired = await store.sql<Upload[]>`
    select u.campaign_id as "campaignId", c.key as campaign, u.upload
    from uploads u join campaigns c on c.id = u.campaign_id
    where u.expires_at <= clock_timestamp()`;
  for (const upload of expired) await clearUpload(store, upload);
}
