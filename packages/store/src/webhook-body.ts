import type { News } from "./webhook-news";

const FORMAT = "weighhouse-webhook/1";

/** What is sent to a webhook, as JSON; of a test nothing moved and nothing turned. */
export function webhookBody(about: {
  /** The delivery's; the same at every try. */
  id: string;
  what: "standings" | "test";
  /** Where people reach this server, such as `http://localhost:3000`. */
  origin: string;
  campaign: string;
  /** The ledger's entries that these standings are of. */
  size: number;
  news: News;
}): object {
  const { id, what, origin, campaign, size, news } = about;
  return {
    format: FORMAT,
    id,
    what,
    campaign,
    size,
    ...news,
    page: `${origin}/campaigns/${campaign}?size=${size}`,
    standings: `${origin}/api/v1/campaigns/${campaign}/standings.json?size=${size}`,
  };
}
