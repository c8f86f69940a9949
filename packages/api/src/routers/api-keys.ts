import { listApiKeys, listApiKeysInput } from "@weighhouse/desk/list-api-keys";
import { makeApiKey, makeApiKeyInput } from "@weighhouse/desk/make-api-key";
import { revokeApiKey, revokeApiKeyInput } from "@weighhouse/desk/revoke-api-key";
import { procedure, router, takes } from "../trpc";

export const apiKeysRouter = router({
  list: procedure
    .input(takes(listApiKeysInput))
    .query(({ ctx, input }) => listApiKeys(ctx.desk, ctx.actor, input)),
  make: procedure
    .input(takes(makeApiKeyInput))
    .mutation(({ ctx, input }) => makeApiKey(ctx.desk, ctx.actor, input)),
  revoke: procedure
    .input(takes(revokeApiKeyInput))
    .mutation(({ ctx, input }) => revokeApiKey(ctx.desk, ctx.actor, input)),
});
