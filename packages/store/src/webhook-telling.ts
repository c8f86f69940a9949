import type { Standings } from "@weighhouse/campaign/standings";
import type { Queries } from "./queries";
import { queueDelivery } from "./webhook-deliveries";
import { isNews, newsSince, toldNow } from "./webhook-news";
import type { News, Told, Wants } from "./webhook-news";

type Listening = Wants & { id: string; told: string | null };

export type Telling = {
  campaignId: number;
  campaign: string;
  size: number;
  standings: Standings;
  /** What is sent of news, under the delivery's id. */
  body: (id: string, news: News) => object;
};

/**
 * Queues a delivery for each webhook that these standings hold news for, in the transaction that
 * keeps them. Its row is locked, and sizes only grow: of two scorers at one campaign, one tells.
 */
export async function tellWebhooks(tx: Queries, telling: Telling): Promise<void> {
  const { campaignId, campaign, size, standings } = telling;
  const listening = await tx<Listening[]>`
    select id, moved_by as "movedBy", turned, told from webhooks
    where campaign_id = ${campaignId} and told_size < ${size} and switched_off_at is null
    order by id for update`;
  for (const webhook of listening) {
    const { news, told } = compared(webhook, standings);
    await tx`
      update webhooks set told = ${JSON.stringify(told)}::text::json, told_size = ${size}
      where campaign_id = ${campaignId} and id = ${webhook.id}`;
    if (news === null) continue;
    await queueDelivery(
      tx,
      { campaignId, campaign, webhook: webhook.id },
      { what: "standings", body: (id) => telling.body(id, news) },
    );
  }
}

/** The first standings ever are where comparing begins. */
function compared(
  { told: text, ...wants }: Listening,
  standings: Standings,
): { news: News | null; told: Told } {
  if (text === null) return { news: null, told: toldNow(standings) };
  const { news, told } = newsSince(JSON.parse(text) as Told, standings, wants);
  return { news: isNews(news) ? news : null, told };
}
