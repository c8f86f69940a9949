import * as z from "zod";
import { webhookBody } from "@weighhouse/store/webhook-body";
import { queueTest } from "@weighhouse/store/webhook-deliveries";
import * as store from "@weighhouse/store/webhooks";
import type { Webhook } from "@weighhouse/store/webhooks";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { onStore } from "./store-refusals";
import { webhookSettings } from "./webhook-settings";

/** Which webhook, of which campaign. */
export const webhookInput = z.strictObject({ key: z.string(), id: z.string().max(100) });
type Input = z.input<typeof webhookInput>;

/** Tells it nothing more, and forgets its secret and what was sent to it. */
export async function removeWebhook(desk: Desk, actor: Actor, input: Input): Promise<void> {
  const { key, id } = parseInput(webhookInput, input);
  await enter(desk, actor, key, "manage-webhooks");
  await onStore(() => store.removeWebhook(desk.store, { campaign: key, id }));
}

/** Tells it again, from what it was last told. */
export async function switchOnWebhook(desk: Desk, actor: Actor, input: Input): Promise<Webhook> {
  const { key, id } = parseInput(webhookInput, input);
  await enter(desk, actor, key, "manage-webhooks");
  return onStore(() => store.switchOnWebhook(desk.store, { campaign: key, id }));
}

/** Sends it a delivery that tells of nothing, once: whether it arrives is in its log. */
export async function testWebhook(
  desk: Desk,
  actor: Actor,
  input: Input,
): Promise<{ delivery: string }> {
  const { key, id: webhook } = parseInput(webhookInput, input);
  const { campaign } = await enter(desk, actor, key, "manage-webhooks");
  const about = { what: "test", campaign: key, size: campaign.size } as const;
  const { origin } = webhookSettings(desk);
  const news = { moved: [], turned: [] };
  const delivery = await onStore(() =>
    queueTest(desk.store, {
      campaign: key,
      webhook,
      body: (id) => webhookBody({ id, ...about, origin, news }),
    }),
  );
  return { delivery };
}
