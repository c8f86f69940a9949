import * as z from "zod";
import { removeWebhook, switchOnWebhook, testWebhook } from "@weighhouse/desk/change-webhook";
import { listWebhooks } from "@weighhouse/desk/list-webhooks";
import { makeWebhook, webhookContent } from "@weighhouse/desk/make-webhook";
import type { makeWebhookInput } from "@weighhouse/desk/make-webhook";
import { nameBasedId } from "./atom";
import { readJson } from "./read-body";
import { created, respondJson } from "./respond";
import { route } from "./route";
import { listedWebhookSchema, webhookSchema } from "./webhook-answers";

const group = "Webhooks";
const scope = "webhooks";
const MAX_BYTES = 16 * 1024;

const parameters = z.strictObject({ id: z.string().describe("The webhook's id.") });

export const webhookRoutes = [
  route({
    method: "GET",
    path: "webhooks",
    group,
    summary: "The webhooks and their newest deliveries",
    scope,
    gives: {
      status: 200,
      types: {
        "application/json": {
          schema: z.strictObject({ webhooks: z.array(listedWebhookSchema) }),
          says: "Each with its 20 newest deliveries.",
        },
      },
    },
    async answer({ desk, actor, request, key }) {
      const webhooks = await listWebhooks(desk, actor, { key });
      return respondJson(request, { webhooks }, `webhooks-${tagOf(webhooks)}`);
    },
  }),
  route({
    method: "POST",
    path: "webhooks",
    group,
    summary: "Make a webhook",
    says: "Has an address told when the standings move: a hypothesis whose log10 Bayes factor against the leader is more than movedBy away from what was last told of it, a verdict that turns. Deliveries are signed by the secret, which is shown this once (RFC 9421, hmac-sha256).",
    scope,
    // Its answer would be kept, and with it the secret.
    once: false,
    takes: {
      "application/json": {
        schema: z.strictObject(webhookContent),
        says: "What it is told, and where.",
        maxBytes: MAX_BYTES,
      },
    },
    gives: {
      status: 201,
      types: {
        "application/json": {
          schema: z.strictObject({ webhook: webhookSchema, secret: z.string() }),
          says: "The webhook and its secret.",
        },
      },
    },
    async answer({ desk, actor, request, key }) {
      const content = (await readJson(request)) as Omit<z.input<typeof makeWebhookInput>, "key">;
      return created(await makeWebhook(desk, actor, { ...content, key }));
    },
  }),
  route({
    method: "DELETE",
    path: "webhooks/{id}",
    group,
    summary: "Remove a webhook",
    scope,
    parameters,
    gives: { status: 204, types: {} },
    async answer({ desk, actor, key, parameters: { id } }) {
      await removeWebhook(desk, actor, { key, id });
      return new Response(null, { status: 204 });
    },
  }),
  route({
    method: "POST",
    path: "webhooks/{id}/test",
    group,
    summary: "Send a test",
    says: "Queues a delivery that tells of nothing, tried once; how it went stands among the webhook's deliveries.",
    scope,
    parameters,
    gives: {
      status: 201,
      types: {
        "application/json": {
          schema: z.strictObject({ delivery: z.string() }),
          says: "The delivery's id.",
        },
      },
    },
    answer: async ({ desk, actor, key, parameters: { id } }) =>
      created(await testWebhook(desk, actor, { key, id })),
  }),
  route({
    method: "POST",
    path: "webhooks/{id}/switch-on",
    group,
    summary: "Switch a webhook on again",
    says: "After deliveries failed for a day and a half: what moved since it was last told is told with what moves next.",
    scope,
    parameters,
    gives: {
      status: 201,
      types: { "application/json": { schema: webhookSchema, says: "The webhook, switched on." } },
    },
    answer: async ({ desk, actor, key, parameters: { id } }) =>
      created(await switchOnWebhook(desk, actor, { key, id })),
  }),
];

/** Changes with every try of any delivery. */
function tagOf(webhooks: Awaited<ReturnType<typeof listWebhooks>>): string {
  return nameBasedId(JSON.stringify(webhooks));
}
