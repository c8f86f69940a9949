import type { Desk } from "./desk";
import type { WebhookReach } from "./webhook-address";

export type WebhookSettings = {
  reach: WebhookReach;
  /** Where people reach this server, such as `http://localhost:3000`: what links lead to. */
  origin: string;
};

/** As the installation's settings have it; without any, deliveries go to public addresses only. */
export function webhookSettings(desk: Desk): WebhookSettings {
  return desk.webhooks ?? { reach: "public", origin: "http://localhost:3000" };
}
