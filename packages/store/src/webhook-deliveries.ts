import { randomUUID } from "node:crypto";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import type { Queries } from "./queries";
import { StoreError } from "./store-error";
import { decryptSecret } from "./webhook-secret";

/** Sends one delivery. */
export const DELIVER_TASK = "deliver-webhook";

/** The queue waits e, e², … up to e¹⁰ seconds between tries: the last is some 34 hours after the first. */
export const MOST_TRIES = 15;
/** A delivery that is done with stays in the log so long. */
const LOG_DAYS = 30;

export type Delivery = {
  id: string;
  what: "standings" | "test";
  queuedAt: string;
  tries: number;
  lastTryAt: string | null;
  /** HTTP status of the last try; null: there was no answer. */
  lastStatus: number | null;
  lastError: string | null;
  deliveredAt: string | null;
  /** It is not tried again. */
  givenUpAt: string | null;
};

/** Puts a delivery on record and its job into the queue, in whatever transaction it is called. */
export async function queueDelivery(
  sql: Queries,
  place: { campaignId: number; campaign: string; webhook: string },
  delivery: { what: Delivery["what"]; body: (id: string) => object },
): Promise<string> {
  const { campaignId, campaign, webhook } = place;
  const id = randomUUID();
  const body = JSON.stringify(delivery.body(id));
  await sql`
    insert into webhook_deliveries (campaign_id, webhook, id, what, body)
    values (${campaignId}, ${webhook}, ${id}, ${delivery.what}, ${body})`;
  await sql`
    delete from webhook_deliveries where campaign_id = ${campaignId} and webhook = ${webhook}
      and queued_at < clock_timestamp() - make_interval(days => ${LOG_DAYS})
      and coalesce(delivered_at, given_up_at) is not null`;
  await sql`
    select graphile_worker.add_job(${DELIVER_TASK},
      ${JSON.stringify({ campaign, delivery: id })}::text::json,
      job_key => ${`webhook:${id}`},
      max_attempts => ${delivery.what === "test" ? 1 : MOST_TRIES})`;
  return id;
}

/** What is to be sent, where, and signed with what. */
export type Outgoing = {
  id: string;
  webhook: string;
  url: string;
  secret: string;
  body: string;
};

/** Null where nothing is to be sent any more: it arrived, was given up, or its webhook is gone. */
export async function readOutgoing(
  store: Store,
  { campaign, delivery }: { campaign: string; delivery: string },
): Promise<Outgoing | null> {
  const { id: campaignId } = await findCampaign(store, campaign, store.db);
  const [row] = await store.sql<{ webhook: string; url: string; secret: Buffer; body: string }[]>`
    select w.id as webhook, w.url, w.secret, d.body
    from webhook_deliveries d
    join webhooks w on w.campaign_id = d.campaign_id and w.id = d.webhook
    where d.campaign_id = ${campaignId} and d.id = ${delivery}
      and d.delivered_at is null and d.given_up_at is null`;
  if (row === undefined) return null;
  const { webhook, url, body } = row;
  const secret = decryptSecret(store, { campaign, webhook }, row.secret);
  return { id: delivery, webhook, url, secret, body };
}

export type Tried =
  { ok: true; status: number } | { ok: false; status: number | null; error: string };

/**
 * Keeps how a try went. The last one of a delivery that failed gives it up, and switches its webhook
 * off unless something else arrived there since it was queued.
 */
export async function recordTry(
  store: Store,
  { campaign, delivery }: { campaign: string; delivery: string },
  { tried, last }: { tried: Tried; last: boolean },
): Promise<void> {
  const { id: campaignId } = await findCampaign(store, campaign, store.db);
  await store.sql.begin(async (tx) => {
    const [row] = await tx<{ webhook: string; what: Delivery["what"]; queuedAt: string }[]>`
      update webhook_deliveries set tries = tries + 1, last_try_at = clock_timestamp(),
        last_status = ${tried.status}, last_error = ${tried.ok ? null : tried.error},
        delivered_at = case when ${tried.ok} then clock_timestamp() end,
        given_up_at = case when ${!tried.ok && last} then clock_timestamp() end
      where campaign_id = ${campaignId} and id = ${delivery}
      returning webhook, what, queued_at as "queuedAt"`;
    if (row === undefined) return;
    const { webhook, what, queuedAt } = row;
    if (tried.ok) {
      await tx`
        update webhooks set last_delivered_at = clock_timestamp()
        where campaign_id = ${campaignId} and id = ${webhook}`;
      return;
    }
    if (!last || what === "test") return;
    const why = `${tried.error}, at every try of a delivery`;
    await tx`
      update webhooks set switched_off_at = clock_timestamp(), switched_off_why = ${why}
      where campaign_id = ${campaignId} and id = ${webhook} and switched_off_at is null
        and (last_delivered_at is null or last_delivered_at < ${queuedAt})`;
    await giveUpWaiting(tx, { campaignId, webhook });
  });
}

/** What waits for a webhook that is switched off is not tried again. */
async function giveUpWaiting(
  tx: Queries,
  { campaignId, webhook }: { campaignId: number; webhook: string },
): Promise<void> {
  await tx`
    update webhook_deliveries d set given_up_at = clock_timestamp(),
      last_error = coalesce(last_error, 'the webhook was switched off')
    where campaign_id = ${campaignId} and webhook = ${webhook} and what = 'standings'
      and delivered_at is null and given_up_at is null
      and exists (select 1 from webhooks w where w.campaign_id = d.campaign_id
        and w.id = d.webhook and w.switched_off_at is not null)`;
}

/** The newest deliveries to a webhook. */
export async function listDeliveries(
  store: Store,
  { campaign, webhook, limit }: { campaign: string; webhook: string; limit: number },
): Promise<Delivery[]> {
  const { id: campaignId } = await findCampaign(store, campaign, store.db);
  return store.sql<Delivery[]>`
    select id, what, queued_at as "queuedAt", tries, last_try_at as "lastTryAt",
      last_status as "lastStatus", last_error as "lastError", delivered_at as "deliveredAt",
      given_up_at as "givenUpAt"
    from webhook_deliveries where campaign_id = ${campaignId} and webhook = ${webhook}
    order by queued_at desc, id limit ${limit}`;
}

/** Queues a delivery that says nothing but that it is one. */
export async function queueTest(
  store: Store,
  { campaign, webhook, body }: { campaign: string; webhook: string; body: (id: string) => object },
): Promise<string> {
  const { id: campaignId } = await findCampaign(store, campaign, store.db);
  return store.sql.begin(async (tx) => {
    const [there] = await tx`
      select 1 from webhooks where campaign_id = ${campaignId} and id = ${webhook} for share`;
    if (there === undefined) {
      throw new StoreError("no-such-webhook", `found no webhook ${webhook} in ${campaign}`);
    }
    return queueDelivery(tx, { campaignId, campaign, webhook }, { what: "test", body });
  });
}
