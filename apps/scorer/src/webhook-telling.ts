import type { Standings } from "@weighhouse/campaign/standings";
import type { Alongside } from "@weighhouse/store/append";
import { webhookBody } from "@weighhouse/store/webhook-body";
import { tellWebhooks } from "@weighhouse/store/webhook-telling";

/** Tells a campaign's webhooks of new standings, in the transaction that keeps them. */
export function tellingOf(told: {
  campaign: string;
  size: number;
  standings: Standings;
  origin: string;
}): Alongside {
  const { campaign, size, standings, origin } = told;
  return (tx, campaignId) =>
    tellWebhooks(tx, {
      campaignId,
      campaign,
      size,
      standings,
      body: (id, news) => webhookBody({ id, what: "standings", origin, campaign, size, news }),
    });
}
