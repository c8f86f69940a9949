"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import { Button } from "@/look/button";
import { Field } from "@/look/field";
import { Notice } from "@/look/notice";
import { useTRPCClient } from "@/trpc/client";
import { FormBody } from "../form-body";
import { refusalOf } from "../refusal";

/** Freezes the newest standings under a code and goes to the page that shows them for ever. */
export function CiteForm({ campaign }: { campaign: string }) {
  const client = useTRPCClient();
  const router = useRouter();
  const [note, setNote] = useState("");
  const [citing, setCiting] = useState(false);
  const [refused, setRefused] = useState<string | null>(null);
  const cite = async () => {
    setCiting(true);
    setRefused(null);
    try {
      const { code } = await client.standings.cite.mutate({
        key: campaign,
        note: note.trim() === "" ? null : note.trim(),
      });
      router.push(`/cite/${code}`);
    } catch (error) {
      setRefused(refusalOf(error).message);
      setCiting(false);
    }
  };
  return (
    <form
      aria-label="Cite the standings"
      onSubmit={(event) => {
        event.preventDefault();
        void cite();
      }}
    >
      <FormBody busy={citing}>
        <Field
          label="Cited in"
          gloss="if you like: the paper, the talk"
          autoComplete="off"
          maxLength={500}
          value={note}
          onChange={(event) => setNote(event.target.value)}
        />
        {refused === null ? null : (
          <Notice role="alert" tone="bad" label="Not cited.">
            {refused}
          </Notice>
        )}
        <Button type="submit" disabled={citing}>
          {citing ? "Freezing…" : "Cite the standings as they are now"}
        </Button>
      </FormBody>
    </form>
  );
}
