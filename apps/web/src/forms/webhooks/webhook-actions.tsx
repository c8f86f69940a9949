"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import { Button } from "@/look/button";
import { Notice } from "@/look/notice";
import { useTRPCClient } from "@/trpc/client";
import { refusalOf } from "../refusal";

/** What one does with a webhook that is there. */
export function WebhookActions(props: { campaign: string; id: string; off: boolean }) {
  const client = useTRPCClient();
  const router = useRouter();
  const [busy, setBusy] = useState(false);
  const [removing, setRemoving] = useState(false);
  const [refused, setRefused] = useState<string | null>(null);
  const which = { key: props.campaign, id: props.id };
  const act = async (call: () => Promise<unknown>) => {
    setBusy(true);
    setRefused(null);
    try {
      await call();
      router.refresh();
    } catch (error) {
      setRefused(refusalOf(error).message);
    } finally {
      setBusy(false);
    }
  };
  return (
    <>
      <div className="mb-2 flex flex-wrap gap-2 text-[14px]">
        <Button disabled={busy} onClick={() => void act(() => client.webhooks.test.mutate(which))}>
          Send a test
        </Button>
        {props.off ? (
          <Button
            disabled={busy}
            onClick={() => void act(() => client.webhooks.switchOn.mutate(which))}
          >
            Switch on again
          </Button>
        ) : null}
        {removing ? (
          <>
            <Button
              kind="grave"
              disabled={busy}
              onClick={() => void act(() => client.webhooks.remove.mutate(which))}
            >
              Remove for good, with its log
            </Button>
            <Button kind="quiet" onClick={() => setRemoving(false)}>
              Keep it
            </Button>
          </>
        ) : (
          <Button kind="quiet" disabled={busy} onClick={() => setRemoving(true)}>
            Remove
          </Button>
        )}
      </div>
      {refused === null ? null : (
        <Notice role="alert" tone="bad" label="Not done.">
          {refused}
        </Notice>
      )}
    </>
  );
}
