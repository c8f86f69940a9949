"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import { Button } from "@/look/button";
import { Notice } from "@/look/notice";
import { useTRPCClient } from "@/trpc/client";
import { refusalOf } from "../refusal";

/** Ends a key, asked twice: what runs with it stops at once. */
export function RevokeKey(props: { campaign: string; id: string; title: string }) {
  const client = useTRPCClient();
  const router = useRouter();
  const [asked, setAsked] = useState(false);
  const [busy, setBusy] = useState(false);
  const [refused, setRefused] = useState<string | null>(null);
  const revoke = async () => {
    setBusy(true);
    setRefused(null);
    try {
      await client.apiKeys.revoke.mutate({ key: props.campaign, id: props.id });
      router.refresh();
    } catch (error) {
      setRefused(refusalOf(error).message);
    } finally {
      setBusy(false);
    }
  };
  return (
    <>
      <div className="flex flex-wrap gap-2 text-[14px]">
        {asked ? (
          <>
            <Button
              kind="grave"
              ref={takeFocus}
              disabled={busy}
              aria-label={`Revoke ${props.title} for good`}
              onClick={() => void revoke()}
            >
              Revoke for good
            </Button>
            <Button kind="quiet" onClick={() => setAsked(false)}>
              Keep it
            </Button>
          </>
        ) : (
          <Button aria-label={`Revoke ${props.title}`} onClick={() => setAsked(true)}>
            Revoke
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

/** Who asked by keyboard goes on from where the first button was. */
function takeFocus(button: HTMLButtonElement | null) {
  button?.focus();
}
