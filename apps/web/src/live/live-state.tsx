"use client";

import { formatDuration } from "@weighhouse/figures/times";
import { useRouter } from "next/navigation";
import { useEffect, useEffectEvent, useRef, useState, useTransition } from "react";
import { useTRPCClient } from "@/trpc/client";
import { followCampaign } from "./stream";
import type { CampaignEvent, StreamState } from "./stream";

const words: Record<StreamState, string> = {
  connecting: "connecting",
  live: "live",
  lost: "not live: reload to see what is new",
};

const SCORED_WITHIN_MS = 800;

/**
 * Keeps the page it stands on at the campaign's newest state: each event makes the server's part
 * of the page be asked for again, without a reload. Says since when nothing has come.
 */
export function LiveState(props: {
  campaignKey: string;
  /** Time of the last entry; null where it says nothing. */
  at: string | null;
  /** Entries that the page shows, and whether its standings are of all of them. */
  shown: { size: number; scored: boolean };
}) {
  const { campaignKey, shown } = props;
  const client = useTRPCClient();
  const refresh = useRefresh();
  const [state, setState] = useState<StreamState>("connecting");
  const since = useSecondsSince(props.at);

  const waiting = useRef<ReturnType<typeof setTimeout>>(undefined);
  const onEvent = useEffectEvent((event: CampaignEvent) => {
    const scored = event.what === "scored";
    if (event.size < shown.size || (event.size === shown.size && (shown.scored || !scored))) return;
    clearTimeout(waiting.current);
    if (scored) refresh();
    // Scoring mostly follows at once: then the page is asked for once, not twice.
    else waiting.current = setTimeout(refresh, SCORED_WITHIN_MS);
  });
  useEffect(
    () => followCampaign(client, campaignKey, { onState: setState, onEvent }),
    [client, campaignKey],
  );

  return (
    <span className={state === "live" ? "text-fir" : "text-quiet"} data-live={state}>
      <span
        aria-hidden="true"
        className={`mr-1.5 inline-block size-2 rounded-full border border-current ${state === "live" ? "bg-current" : ""}`}
      />
      {words[state]}
      {since === null ? "" : `, last entry ${formatDuration(since * 1000)} ago`}
    </span>
  );
}

/** Asks for the page's data again; news that come while it is on its way make it ask once more. */
function useRefresh(): () => void {
  const router = useRouter();
  const [pending, start] = useTransition();
  const again = useRef(false);
  useEffect(() => {
    if (pending || !again.current) return;
    again.current = false;
    start(() => router.refresh());
  }, [pending, router]);
  return () => {
    if (pending) again.current = true;
    else start(() => router.refresh());
  };
}

/** Null on the server and until the browser's clock is read, so that both paint alike. */
function useSecondsSince(at: string | null): number | null {
  const [now, setNow] = useState<number | null>(null);
  useEffect(() => {
    const tick = () => setNow(Date.now());
    tick();
    const timer = setInterval(tick, 5_000);
    return () => clearInterval(timer);
  }, []);
  return now === null || at === null
    ? null
    : Math.max(0, Math.round((now - Date.parse(at)) / 1000));
}
