import { listen } from "@weighhouse/store/listen";
import type { StoreEvent } from "@weighhouse/store/listen";
import type { Store } from "@weighhouse/store/open-store";

/** At most this many events a second for a campaign. */
export const EVENTS_PER_SECOND = 5;
const GAP_MS = 1000 / EVENTS_PER_SECOND;

type Watcher = (event: StoreEvent) => void;
type Channel = {
  watchers: Set<Watcher>;
  /** Heard since the last one was told; the latest wins. */
  pending: StoreEvent | null;
  timer: NodeJS.Timeout | null;
};

/** One LISTEN for this process, told on to everyone here who watches a campaign. */
export class EventHub {
  readonly #store: Store;
  readonly #channels = new Map<string, Channel>();
  #listening: Promise<() => Promise<void>> | null = null;

  constructor(store: Store) {
    this.#store = store;
  }

  /**
   * Tells a watcher of a campaign's events from now on. Resolves once they are heard: what is read
   * from the database afterwards misses nothing.
   *
   * @returns stops telling
   */
  async watch(campaign: string, watcher: Watcher): Promise<() => void> {
    const channel = this.#channels.get(campaign) ?? {
      watchers: new Set(),
      pending: null,
      timer: null,
    };
    this.#channels.set(campaign, channel);
    channel.watchers.add(watcher);
    await this.#listen();
    return () => {
      channel.watchers.delete(watcher);
      if (channel.watchers.size === 0 && channel.timer === null) this.#channels.delete(campaign);
    };
  }

  /** Stops listening; who watches hears nothing more. */
  async close(): Promise<void> {
    for (const { timer } of this.#channels.values()) if (timer) clearTimeout(timer);
    this.#channels.clear();
    const listening = this.#listening;
    this.#listening = null;
    if (listening) await (await listening)();
  }

  async #listen(): Promise<void> {
    this.#listening ??= listen(this.#store, (event) => this.#hear(event));
    try {
      await this.#listening;
    } catch (error) {
      // The next watcher tries again.
      this.#listening = null;
      throw error;
    }
  }

  #hear(event: StoreEvent): void {
    const channel = this.#channels.get(event.campaign);
    if (!channel) return;
    channel.pending = event;
    if (channel.timer === null) this.#tell(event.campaign, channel);
  }

  /** Tells what is pending, then keeps quiet for a while and tells what came meanwhile. */
  #tell(campaign: string, channel: Channel): void {
    const event = channel.pending;
    channel.pending = null;
    channel.timer = null;
    if (event === null) {
      if (channel.watchers.size === 0) this.#channels.delete(campaign);
      return;
    }
    for (const watcher of channel.watchers) watcher(event);
    channel.timer = setTimeout(() => this.#tell(campaign, channel), GAP_MS);
    channel.timer.unref();
  }
}

const hubs = new WeakMap<Store, EventHub>();

/** The one hub of a store in this process. */
export function hubOf(store: Store): EventHub {
  const hub = hubs.get(store) ?? new EventHub(store);
  hubs.set(store, hub);
  return hub;
}
