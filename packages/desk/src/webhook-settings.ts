import type { WebhookReach } from "./webhook-address";

export type WebhookSettings = {
  reach: WebhookReach;
  /** Where people reach this server, such as `http://localhost:3000`: what links lead to. */
  origin: string;
};

/** Without any settings, deliveries go to public addresses only. */
const PUBLIC_ONLY: WebhookSettings = { reach: "public", origin: "http://localhost:3000" };

/** As the installation's settings have it. */
export function webhookSettings(desk: { webhooks?: WebhookSettings }): WebhookSettings {
  return desk.webhooks ?? PUBLIC_ONLY;
}
