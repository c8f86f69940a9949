import * as z from "zod";
import { listDeliveries } from "@weighhouse/store/webhook-deliveries";
import type { Delivery } from "@weighhouse/store/webhook-deliveries";
import { listWebhooks as listStored } from "@weighhouse/store/webhooks";
import type { Webhook } from "@weighhouse/store/webhooks";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";

const DELIVERIES_SHOWN = 20;

export const listWebhooksInput = z.strictObject({ key: z.string() });

export type ListedWebhook = Webhook & { deliveries: Delivery[] };

/** A campaign's webhooks, each with its newest deliveries; their secrets are shown to nobody. */
export async function listWebhooks(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof listWebhooksInput>,
): Promise<ListedWebhook[]> {
  const { key } = parseInput(listWebhooksInput, input);
  await enter(desk, actor, key, "manage-webhooks");
  const webhooks = await listStored(desk.store, key);
  return Promise.all(
    webhooks.map(async (webhook) => ({
      ...webhook,
      deliveries: await listDeliveries(desk.store, {
        campaign: key,
        webhook: webhook.id,
        limit: DELIVERIES_SHOWN,
      }),
    })),
  );
}
