"use client";

import { formatDuration } from "@weighhouse/figures/times";
import { useRouter } from "next/navigation";
import { useEffect, useState } from "react";
import { useTRPCClient } from "@/trpc/client";
import { followCampaign } from "./stream";
import type { StreamState } from "./stream";

const words: Record<StreamState, string> = {
  connecting: "connecting",
  live: "live",
  lost: "not live: reload to see what is new",
};

/**
 * Keeps the page it stands on at the campaign's newest state: each event makes the server's part
 * of the page be asked for again, without a reload. Says since when nothing has come.
 */
export function LiveState({ campaignKey, at }: { campaignKey: string; at: string }) {
  const router = useRouter();
  const client = useTRPCClient();
  const [state, setState] = useState<StreamState>("connecting");
  const since = useSecondsSince(at);

  useEffect(
    () =>
      followCampaign(client, campaignKey, {
        onState: setState,
        onEvent: () => router.refresh(),
      }),
    [client, campaignKey, router],
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

/** Null on the server and until the browser's clock is read, so that both paint alike. */
function useSecondsSince(at: string): number | null {
  const [now, setNow] = useState<number | null>(null);
  useEffect(() => {
    const tick = () => setNow(Date.now());
    tick();
    const timer = setInterval(tick, 5_000);
    return () => clearInterval(timer);
  }, []);
  return now === null ? null : Math.max(0, Math.round((now - Date.parse(at)) / 1000));
}
