"use client";

import { useState } from "react";
import { useFormContext } from "react-hook-form";
import { z } from "zod";
import { Field } from "@/look/field";
import { Notice } from "@/look/notice";
import { useTRPCClient } from "@/trpc/client";
import { PartForm } from "../declare/part-form";
import { numberFromText } from "../entered-text";
import { FieldRow, Tick } from "../form-frame";
import { formSchema } from "../form-schema";

interface WebhookDraft {
  url: string;
  movedBy: string;
  turned: boolean;
}

const empty: WebhookDraft = { url: "", movedBy: "0.5", turned: true };

// The server's own has the campaign's key besides, and knows which addresses it may reach.
const content = z.strictObject({
  url: z.url({ protocol: /^https?$/, error: "an https address" }),
  movedBy: z.number().positive().max(1e6).nullable(),
  turned: z.boolean(),
});

const schema = formSchema<WebhookDraft, z.output<typeof content>>({
  schema: content,
  content: ({ url, movedBy, turned }) => ({
    url: url.trim(),
    movedBy: numberFromText(movedBy),
    turned,
  }),
});

/** Has an address told; its secret is shown once, until one leaves the page. */
export function WebhookForm({ campaign }: { campaign: string }) {
  const client = useTRPCClient();
  const [made, setMade] = useState<{ url: string; secret: string } | null>(null);
  return (
    <>
      {made === null ? null : (
        <Notice tone="good" label="Made.">
          Deliveries to <span className="break-all">{made.url}</span> are signed with this secret.
          It is shown this once: keep it where the receiver reads it.
          <pre className="mt-1 whitespace-pre-wrap break-all">
            <code data-secret>{made.secret}</code>
          </pre>
        </Notice>
      )}
      <PartForm
        name={`webhook:${campaign}`}
        label="Tell another address"
        button="Make webhook"
        defaults={empty}
        schema={schema}
        send={async (wanted) => {
          const { webhook, secret } = await client.webhooks.make.mutate({
            key: campaign,
            ...wanted,
          });
          setMade({ url: webhook.url, secret });
        }}
        done={() => "It is told from now on. Send it a test to see that it arrives."}
      >
        <Fields />
      </PartForm>
    </>
  );
}

function Fields() {
  const { register, formState } = useFormContext<WebhookDraft>();
  const { errors } = formState;
  return (
    <>
      <FieldRow>
        <Field
          label="Address"
          type="url"
          inputMode="url"
          help="Where your program listens for a POST, by https."
          placeholder="https://"
          autoComplete="off"
          error={errors.url?.message}
          {...register("url")}
        />
        <Field
          label="Moves by more than"
          gloss="in log₁₀ B"
          inputMode="decimal"
          help="Told once a hypothesis’s Bayes factor against the leader is so far from what it was when last told. Empty: no moves are told."
          autoComplete="off"
          error={errors.movedBy?.message}
          {...register("movedBy")}
        />
      </FieldRow>
      <Tick
        label="Verdicts that turn"
        help="From awaiting to pass, from pass to fail, and every other way."
        {...register("turned")}
      />
      {errors.turned?.message ? (
        <Notice tone="bad" role="alert">
          {errors.turned.message}
        </Notice>
      ) : null}
    </>
  );
}
