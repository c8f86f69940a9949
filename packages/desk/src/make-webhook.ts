import * as z from "zod";
import { createWebhook, listWebhooks } from "@weighhouse/store/webhooks";
import type { Webhook } from "@weighhouse/store/webhooks";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { DeskError, invalid } from "./desk-error";
import { parseInput } from "./parse-input";
import { onStore } from "./store-refusals";
import { addressFault } from "./webhook-address";
import { webhookSettings } from "./webhook-settings";

const MOST_WEBHOOKS = 20;

export const webhookContent = {
  url: z.string(),
  /** Tells a hypothesis whose log10 Bayes factor against the leader moved by more; absent: none. */
  movedBy: z.number().positive().max(1e6).nullish(),
  /** Tells verdicts that turn. */
  turned: z.boolean(),
};

export const makeWebhookInput = z.strictObject({ key: z.string(), ...webhookContent });

/** Has an address told when the standings move; the secret is shown this once. */
export async function makeWebhook(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof makeWebhookInput>,
): Promise<{ webhook: Webhook; secret: string }> {
  const { key, url, movedBy = null, turned } = parseInput(makeWebhookInput, input);
  const { member } = await enter(desk, actor, key, "manage-webhooks");
  const fault = addressFault(url, webhookSettings(desk).reach);
  if (fault !== null) throw invalid([{ pointer: "/url", code: "bad-format", ...fault }]);
  if (movedBy === null && !turned) {
    const found = "neither moves nor turns to be told";
    const allowed = "one of the two, or both";
    throw invalid([{ pointer: "/turned", code: "contradiction", found, allowed }]);
  }
  const there = await listWebhooks(desk.store, key);
  if (there.length >= MOST_WEBHOOKS) {
    const words = `found ${there.length} webhooks in ${key}; allowed ${MOST_WEBHOOKS}: remove one first`;
    throw new DeskError("conflict", words);
  }
  return onStore(() =>
    createWebhook(desk.store, { campaign: key, url, movedBy, turned, madeBy: member ?? "" }),
  );
}
