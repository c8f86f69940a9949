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
 *
 * @throws {DeskError} when the actor may not read the campaign
 */
export async function watchCampaign(
  ctx: Context,
  { key, lastEventId }: WatchInput,
  leaving: AbortSignal | undefined,
): Promise<AsyncGenerator<StoreEvent>> {
  const stop = AbortSignal.any([closing.signal, ...(leaving ? [leaving] : [])]);
  const latest = new Latest();
  const unwatch = await hubOf(ctx.desk.store).watch(key, (event) => latest.put(event));
  // Also for a watcher who goes before the first event is asked for.
  stop.addEventListener("abort", () => {
    unwatch();
    latest.wake();
  });
  try {
    // Read after listening has begun, so that nothing falls between the two.
    const { size, scoredSize } = await readProgress(ctx.desk, ctx.actor, { key });
    const what = scoredSize === size ? "scored" : "appended";
    const now = { campaign: key, size, what } as const;
    return follow(latest, { now, seen: lastEventId ?? null, stop, unwatch });
  } catch (refused) {
    unwatch();
    throw refused;
  }
}

async function* follow(
  latest: Latest,
  watch: { now: StoreEvent; seen: string | null; stop: AbortSignal; unwatch: () => void },
): AsyncGenerator<StoreEvent> {
  let { seen } = watch;
  let event: StoreEvent | null = watch.now;
  try {
    while (!watch.stop.aborted) {
      if (event !== null && eventId(event) !== seen) {
        seen = eventId(event);
        yield event;
      }
      event = latest.take();
      if (event === null) await latest.news();
    }
  } finally {
    watch.unwatch();
  }
}

/** Holds the newest event until it is taken; what came before it is in it. */
class Latest {
  #event: StoreEvent | null = null;
  #wake = () => {};

  put(event: StoreEvent): void {
    this.#event = event;
    this.#wake();
  }

  take(): StoreEvent | null {
    const event = this.#event;
    this.#event = null;
    return event;
  }

  wake(): void {
    this.#wake();
  }

  /** Resolves when there is something to take, or `wake` was called. */
  news(): Promise<void> {
    return new Promise((resolve) => {
      this.#wake = resolve;
    });
  }
}
