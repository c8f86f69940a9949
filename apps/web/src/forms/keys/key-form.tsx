"use client";

import { useState } from "react";
import { useFormContext } from "react-hook-form";
import { Choice, Field } from "@/look/field";
import { useTRPCClient } from "@/trpc/client";
import { PartForm } from "../declare/part-form";
import { FieldRow, Tick } from "../form-frame";
import { formSchema } from "../form-schema";
import { emptyKey, keyContent, keySchema } from "./key-draft";
import type { KeyContent, KeyDraft } from "./key-draft";
import { KeyShown } from "./key-shown";
import { scopesInOrder, scopeWords } from "./scope-words";

const schema = formSchema<KeyDraft, KeyContent>({
  schema: keySchema,
  content: (draft) => keyContent(draft, new Date()),
});

/** Makes a key; what it made is shown until one leaves the page, and never again. */
export function KeyForm({ campaign }: { campaign: string }) {
  const client = useTRPCClient();
  const [made, setMade] = useState<{ text: string; title: string } | null>(null);
  return (
    <>
      {made === null ? null : <KeyShown key={made.text} title={made.title} text={made.text} />}
      <PartForm
        name={`api-key:${campaign}`}
        label="Make a key"
        button="Make key"
        defaults={emptyKey}
        schema={schema}
        send={async (wanted) => {
          const { text } = await client.apiKeys.make.mutate({ key: campaign, ...wanted });
          setMade({ text, title: wanted.title });
        }}
        done={({ title }) => `${title} is in the list.`}
      >
        <Fields />
      </PartForm>
    </>
  );
}

function Fields() {
  const { register, formState } = useFormContext<KeyDraft>();
  const { errors } = formState;
  const ofScopes = errors.scopes?.message;
  return (
    <>
      <FieldRow>
        <Field
          label="What it is for"
          help="To tell it from others later: the instrument’s pipeline, say."
          autoComplete="off"
          error={errors.title?.message}
          {...register("title")}
        />
        <Choice
          label="Holds for"
          help="After that it opens nothing; you can revoke it before."
          error={errors.days?.message}
          {...register("days")}
        >
          <option value="30">30 days</option>
          <option value="90">90 days</option>
          <option value="365">a year</option>
          <option value="">until it is revoked</option>
        </Choice>
      </FieldRow>
      <fieldset
        className="min-w-0"
        aria-describedby={ofScopes === undefined ? undefined : "scopes-error"}
      >
        <legend className="mb-1.5 font-medium">What a program may do with it</legend>
        <div className="grid items-start gap-x-5 sm:grid-cols-2 lg:grid-cols-3">
          {scopesInOrder.map((scope) => (
            <Tick
              key={scope}
              label={scopeWords[scope].label}
              help={
                <>
                  {scopeWords[scope].help} <code>{scope}</code>
                </>
              }
              {...register(`scopes.${scope}`)}
            />
          ))}
        </div>
        {ofScopes === undefined ? null : (
          <p id="scopes-error" role="alert" className="mb-2 text-[13.5px] font-medium text-rust">
            Tick one or more: a key for nothing opens nothing.
          </p>
        )}
      </fieldset>
    </>
  );
}
