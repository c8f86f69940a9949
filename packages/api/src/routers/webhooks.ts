import {
  removeWebhook,
  switchOnWebhook,
  testWebhook,
  webhookInput,
} from "@weighhouse/desk/change-webhook";
import { listWebhooks, listWebhooksInput } from "@weighhouse/desk/list-webhooks";
import { makeWebhook, makeWebhookInput } from "@weighhouse/desk/make-webhook";
import { procedure, router, takes } from "../trpc";

export const webhooksRouter = router({
  list: procedure
    .input(takes(listWebhooksInput))
    .query(({ ctx, input }) => listWebhooks(ctx.desk, ctx.actor, input)),
  make: procedure
    .input(takes(makeWebhookInput))
    .mutation(({ ctx, input }) => makeWebhook(ctx.desk, ctx.actor, input)),
  remove: procedure
    .input(takes(webhookInput))
    .mutation(({ ctx, input }) => removeWebhook(ctx.desk, ctx.actor, input)),
  switchOn: procedure
    .input(takes(webhookInput))
    .mutation(({ ctx, input }) => switchOnWebhook(ctx.desk, ctx.actor, input)),
  test: procedure
    .input(takes(webhookInput))
    .mutation(({ ctx, input }) => testWebhook(ctx.desk, ctx.actor, input)),
});
