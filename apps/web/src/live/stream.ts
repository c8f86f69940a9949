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
type Message =
  | { type: "event"; event: CampaignEvent }
  | { type: "state"; state: StreamState }
  | { type: "hello" };

/**
 * Follows a campaign's events over one connection shared by all tabs of this browser: the tab that
 * holds the lock keeps the stream and tells the others, since a browser opens only six HTTP/1.1
 * connections to a server. Where there are no locks (plain HTTP on another machine) each tab keeps
 * its own stream, only while it is to be seen.
 *
 * @returns stops following
 */
export function followCampaign(client: Client, key: string, listener: StreamListener): () => void {
  const stopping = new AbortController();
  if (navigator.locks && typeof BroadcastChannel !== "undefined") {
    followTogether(client, key, listener, stopping.signal);
  } else {
    followWhileVisible(client, key, listener, stopping.signal);
  }
  return () => stopping.abort();
}

function followTogether(client: Client, key: string, listener: StreamListener, stop: AbortSignal) {
  const name = `weighhouse:${key}`;
  const channel = new BroadcastChannel(name);
  // oxlint-disable-next-line unicorn/require-post-message-target-origin -- a channel has one origin, the rule takes it for a window
  const post = (message: Message) => channel.postMessage(message);
  let leading = false;
  let state: StreamState = "connecting";
  const tell = (message: Message) => {
    deliver(message, listener);
    post(message);
  };
  channel.addEventListener("message", (message: MessageEvent<Message>) => {
    // A tab that comes later asks how things stand.
    if (message.data.type === "hello") {
      if (leading) post({ type: "state", state });
    } else deliver(message.data, listener);
  });
  post({ type: "hello" });
  const lead = () =>
    new Promise<void>((resolve) => {
      leading = true;
      const close = openStream(client, key, {
        onEvent: (event) => tell({ type: "event", event }),
        onState: (next) => {
          state = next;
          tell({ type: "state", state });
        },
      });
      stop.addEventListener("abort", () => {
        close();
        resolve();
      });
    });
  navigator.locks.request(name, { signal: stop }, lead).catch(() => {
    // Aborted while waiting for its turn: this tab stopped following before it ever led.
  });
  stop.addEventListener("abort", () => channel.close());
}

function followWhileVisible(
  client: Client,
  key: string,
  listener: StreamListener,
  stop: AbortSignal,
) {
  let close: (() => void) | null = null;
  const update = () => {
    if (document.visibilityState === "visible") close ??= openStream(client, key, listener);
    else {
      close?.();
      close = null;
    }
  };
  document.addEventListener("visibilitychange", update, { signal: stop });
  stop.addEventListener("abort", () => close?.());
  update();
}

function openStream(client: Client, key: string, listener: StreamListener): () => void {
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
  return () => subscription.unsubscribe();
}

function deliver(message: Message, listener: StreamListener) {
  if (message.type === "event") listener.onEvent(message.event);
  if (message.type === "state") listener.onState(message.state);
}
