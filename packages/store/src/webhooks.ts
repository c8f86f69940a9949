import { randomUUID } from "node:crypto";
import type { Standings } from "@weighhouse/campaign/standings";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import type { Queries } from "./queries";
import { StoreError } from "./store-error";
import { toldNow } from "./webhook-news";
import type { Wants } from "./webhook-news";
import { encryptSecret, newSecret } from "./webhook-secret";

export type Webhook = {
  id: string;
  url: string;
  /** Tells a hypothesis whose log10 Bayes factor against the leader moved by more; null: none. */
  movedBy: number | null;
  /** Tells verdicts that turn. */
  turned: boolean;
  /** Opaque id of the member who made it. */
  madeBy: string;
  madeAt: string;
  lastDeliveredAt: string | null;
  /** Null: it is on. */
  switchedOffAt: string | null;
  switchedOffWhy: string | null;
};

type Place = { campaign: string; id: string };

/** The webhooks of a campaign, oldest first. */
export async function listWebhooks(store: Store, campaign: string): Promise<Webhook[]> {
  const { id } = await findCampaign(store, campaign, store.db);
  return readWebhooks(store.sql, id);
}

/**
 * Makes a webhook that is told what moves from the newest standings on.
 *
 * @returns its secret too, which is shown this once: what is kept is encrypted
 * @throws {StoreError} `no-seal-key`
 */
export async function createWebhook(
  store: Store,
  made: Wants & { campaign: string; url: string; madeBy: string },
): Promise<{ webhook: Webhook; secret: string }> {
  const { campaign, url, movedBy, turned, madeBy } = made;
  const { id: campaignId } = await findCampaign(store, campaign, store.db);
  const id = randomUUID();
  const secret = newSecret();
  const { encrypted, keyFingerprint } = encryptSecret(store, { campaign, webhook: id }, secret);
  const newest = await newestStandings(store.sql, campaignId);
  const told = newest && JSON.stringify(toldNow(newest.standings));
  await store.sql`
    insert into webhooks (campaign_id, id, url, moved_by, turned, secret, key_fingerprint, made_by,
      told, told_size)
    values (${campaignId}, ${id}, ${url}, ${movedBy}, ${turned}, ${Buffer.from(encrypted)},
      ${keyFingerprint}, ${madeBy}, ${told}::text::json, ${newest?.size ?? 0})`;
  const [webhook] = await readWebhooks(store.sql, campaignId, id);
  return { webhook: webhook!, secret };
}

/** @throws {StoreError} `no-such-webhook` */
export async function removeWebhook(store: Store, { campaign, id }: Place): Promise<void> {
  const { id: campaignId } = await findCampaign(store, campaign, store.db);
  const { count } = await store.sql`
    delete from webhooks where campaign_id = ${campaignId} and id = ${id}`;
  if (count === 0) throw noSuchWebhook({ campaign, id });
}

/** Switches it on again: what moved since it was last told is told with what moves next. */
export async function switchOnWebhook(store: Store, { campaign, id }: Place): Promise<Webhook> {
  const { id: campaignId } = await findCampaign(store, campaign, store.db);
  await store.sql`
    update webhooks set switched_off_at = null, switched_off_why = null
    where campaign_id = ${campaignId} and id = ${id}`;
  const [webhook] = await readWebhooks(store.sql, campaignId, id);
  if (webhook === undefined) throw noSuchWebhook({ campaign, id });
  return webhook;
}

function readWebhooks(sql: Queries, campaignId: number, id: string | null = null) {
  return sql<Webhook[]>`
    select id, url, moved_by as "movedBy", turned, made_by as "madeBy", made_at as "madeAt",
      last_delivered_at as "lastDeliveredAt", switched_off_at as "switchedOffAt",
      switched_off_why as "switchedOffWhy"
    from webhooks
    where campaign_id = ${campaignId} and (${id}::text is null or id = ${id})
    order by made_at, id`;
}

async function newestStandings(
  sql: Queries,
  campaignId: number,
): Promise<{ size: number; standings: Standings } | null> {
  const [row] = await sql<{ size: number; document: string }[]>`
    select size, document from standings
    where campaign_id = ${campaignId} and document is not null
    order by size desc, scored_at desc limit 1`;
  return row ? { size: row.size, standings: JSON.parse(row.document) as Standings } : null;
}

function noSuchWebhook({ campaign, id }: Place): StoreError {
  return new StoreError("no-such-webhook", `found no webhook ${id} in ${campaign}`);
}
