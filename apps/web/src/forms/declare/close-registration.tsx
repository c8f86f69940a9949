"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import { Button } from "@/look/button";
import { Notice } from "@/look/notice";
import { useTRPCClient } from "@/trpc/client";
import { FormBody } from "../form-body";
import { Tick } from "../form-frame";
import { refusalOf } from "../refusal";

/** Closes registration now, ahead of its date. It can't be opened again, so it asks first. */
export function CloseRegistration({ campaign }: { campaign: string }) {
  const client = useTRPCClient();
  const router = useRouter();
  const [sure, setSure] = useState(false);
  const [closing, setClosing] = useState(false);
  const [refused, setRefused] = useState<string | null>(null);
  const close = async () => {
    setClosing(true);
    setRefused(null);
    try {
      await client.campaigns.closeRegistration.mutate({ key: campaign });
      router.refresh();
    } catch (error) {
      setRefused(refusalOf(error).message);
    } finally {
      setClosing(false);
    }
  };
  return (
    <FormBody busy={closing}>
      <Tick
        label="Close it for good, now"
        help="Whoever registers later is marked as filed after data, and counts as silent in the standings."
        checked={sure}
        onChange={(event) => setSure(event.target.checked)}
      />
      {refused === null ? null : (
        <Notice role="alert" tone="bad" label="Not closed.">
          {refused}
        </Notice>
      )}
      <Button kind="grave" disabled={!sure || closing} onClick={() => void close()}>
        Close registration
      </Button>
    </FormBody>
  );
}
