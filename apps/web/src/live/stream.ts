import type { useTRPCClient } from "@/trpc/client";

export interface CampaignEvent {
  campaign: string;
  size: number;
  what: "appended" | "scored";
}

export type StreamState = "connecting" | "live" | "lost";

export interface StreamListener {
  onEvent(event: CampaignEvent): void;
  onState(state: StreamState): void;
}

type Client = ReturnType<typeof useTRPCClient>;
type Follow = (client: Client, key: string, listener: StreamListener, stop: AbortSignal) => void;
type Message =
  | { type: "event"; event: CampaignEvent }
  | { type: "state"; state: StreamState }
  | { type: "hello" };

/**
 * Follows a campaign's events over one connection shared by all tabs of this browser, since a
 * browser opens only six HTTP/1.1 connections to a server. A tab that is not to be seen follows
 * nothing; the first message after it is shown again says how things stand by then.
 *
 * @returns stops following
 */
export function followCampaign(client: Client, key: string, listener: StreamListener): () => void {
  // Locks are missing on plain HTTP from another machine: there each tab has its own stream.
  const follow: Follow =
    "locks" in navigator && typeof BroadcastChannel !== "undefined" ? followTogether : followAlone;
  let current: AbortController | null = null;
  const update = () => {
    if (document.visibilityState === "hidden") {
      current?.abort();
      current = null;
    } else if (current === null) {
      current = new AbortController();
      follow(client, key, listener, current.signal);
    }
  };
  document.addEventListener("visibilitychange", update);
  update();
  return () => {
    document.removeEventListener("visibilitychange", update);
    current?.abort();
  };
}

/** The tab that holds the lock keeps the stream and tells the others, who wait for their turn. */
const followTogether: Follow = (client, key, listener, stop) => {
  const name = `weighhouse:${key}`;
  const channel = new BroadcastChannel(name);
  // oxlint-disable-next-line unicorn/require-post-message-target-origin -- a channel has one origin, the rule takes it for a window
  const post = (message: Message) => channel.postMessage(message);
  const told: { state: StreamState; event: CampaignEvent | null } = {
    state: "connecting",
    event: null,
  };
  let leading = false;

  channel.addEventListener("message", ({ data }: MessageEvent<Message>) => {
    if (data.type === "event") listener.onEvent(data.event);
    else if (data.type === "state") listener.onState(data.state);
    else if (leading) {
      // A tab that comes later asks how things stand.
      post({ type: "state", state: told.state });
      if (told.event) post({ type: "event", event: told.event });
    }
  });
  post({ type: "hello" });

  const lead = () =>
    new Promise<void>((resolve) => {
      leading = true;
      const own = new AbortController();
      stop.addEventListener("abort", () => {
        own.abort();
        resolve();
      });
      followAlone(
        client,
        key,
        {
          onEvent: (event) => {
            told.event = event;
            listener.onEvent(event);
            post({ type: "event", event });
          },
          onState: (state) => {
            told.state = state;
            listener.onState(state);
            post({ type: "state", state });
          },
        },
        own.signal,
      );
    });
  navigator.locks.request(name, { signal: stop }, lead).catch(() => {
    // Aborted while it waited for its turn: this tab stopped following before it ever led.
  });
  stop.addEventListener("abort", () => channel.close());
};

const followAlone: Follow = (client, key, listener, stop) => {
  const subscription = client.events.watch.subscribe(
    { key },
    {
      onStarted: () => listener.onState("live"),
      onData: (message) => listener.onEvent(message.data),
      onConnectionStateChange: ({ state }) => {
        if (state === "connecting") listener.onState("connecting");
        if (state === "pending") listener.onState("live");
      },
      onError: () => listener.onState("lost"),
    },
  );
  stop.addEventListener("abort", () => subscription.unsubscribe());
};
