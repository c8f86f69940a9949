import * as z from "zod";
import { tracked } from "@trpc/server";
import type { StoreEvent } from "@weighhouse/store/listen";
import { eventId, watchCampaign } from "../watch-campaign";
import { procedure, router } from "../trpc";

/** `lastEventId` is sent by the browser itself when it connects anew. */
const watchInput = z.object({ key: z.string(), lastEventId: z.string().nullish() });

export const eventsRouter = router({
  // The watch begins, or is refused, before the stream: so the refusal gets its own code.
  watch: procedure.input(watchInput).subscription(async ({ ctx, input, signal }) => {
    const events = await watchCampaign(ctx, input, signal);
    return trackedEvents(events);
  }),
});

async function* trackedEvents(events: AsyncIterable<StoreEvent>) {
  for await (const event of events) yield tracked(eventId(event), event);
}
