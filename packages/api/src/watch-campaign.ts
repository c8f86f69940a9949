import { readProgress } from "@weighhouse/desk/read-progress";
import type { StoreEvent } from "@weighhouse/store/listen";
import { closing } from "./closing";
import type { Context } from "./context";
import { hubOf } from "./event-hub";

export type WatchInput = {
  key: string;
  /** `eventId` of the last event that the watcher has seen, or of the state that its page shows. */
  lastEventId?: string | null | undefined;
};

/** An event's identity: of two with the same one, the second says nothing new. */
export function eventId({ size, what }: Pick<StoreEvent, "size" | "what">): string {
  return `${size}:${what}`;
}

/**
 * What happens to a campaign, first how it stands now unless the watcher has seen that. Ends when
 * the watcher goes or the process is told to stop.
 */
export async function* watchCampaign(
  ctx: Context,
  input: WatchInput,
  leaving: AbortSignal | undefined,
): AsyncGenerator<StoreEvent> {
  const stop = AbortSignal.any([closing.signal, ...(leaving ? [leaving] : [])]);
  // Whether the actor may watch is asked before anything is listened to.
  await readProgress(ctx.desk, ctx.actor, { key: input.key });
  let newest: StoreEvent | null = null;
  let wake = () => {};
  const unwatch = await hubOf(ctx.desk.store).watch(input.key, (event) => {
    newest = event;
    wake();
  });
  stop.addEventListener("abort", () => wake());
  try {
    // Read after listening has begun, so that nothing falls between the two.
    const { size, scoredSize } = await readProgress(ctx.desk, ctx.actor, { key: input.key });
    newest ??= { campaign: input.key, size, what: scoredSize === size ? "scored" : "appended" };
    let seen = input.lastEventId ?? null;
    while (!stop.aborted) {
      const event: StoreEvent | null = newest;
      newest = null;
      if (event === null) await new Promise<void>((resolve) => (wake = resolve));
      else if (eventId(event) !== seen) {
        seen = eventId(event);
        yield event;
      }
    }
  } finally {
    unwatch();
  }
}
