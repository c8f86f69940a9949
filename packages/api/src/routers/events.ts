import * as z from "zod";
import { tracked } from "@trpc/server";
import { eventId, watchCampaign } from "../watch-campaign";
import { procedure, router } from "../trpc";

/** `lastEventId` is sent by the browser itself when it connects anew. */
const watchInput = z.object({ key: z.string(), lastEventId: z.string().nullish() });

export const eventsRouter = router({
  watch: procedure.input(watchInput).subscription(async function* ({ ctx, input, signal }) {
    for await (const event of watchCampaign(ctx, input, signal)) {
      yield tracked(eventId(event), event);
    }
  }),
});
