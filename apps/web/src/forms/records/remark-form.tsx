"use client";

import { payloadSchemas } from "@weighhouse/campaign/entries";
import { useFormContext } from "react-hook-form";
import type { z } from "zod";
import { Choice, TextArea } from "@/look/field";
import { useTRPCClient } from "@/trpc/client";
import { PartForm } from "../declare/part-form";
import { formSchema } from "../form-schema";

interface RemarkDraft {
  kind: "question" | "objection" | "answer";
  text: string;
}

const empty: RemarkDraft = { kind: "question", text: "" };
const remark = payloadSchemas["remark.made"].omit({ on: true });
const schema = formSchema<RemarkDraft, z.output<typeof remark>>({
  schema: remark,
  content: ({ kind, text }) => ({ kind, text: text.trim() }),
});

/** A remark on an entry; it becomes an entry of its own. */
export function RemarkForm({ campaign, on }: { campaign: string; on: number }) {
  const client = useTRPCClient();
  return (
    <PartForm
      name={`remark:${campaign}:${on}`}
      label="Remark on this entry"
      button="Put it on record"
      defaults={empty}
      schema={schema}
      send={(content) => client.ledger.remark.mutate({ key: campaign, on, ...content })}
      done={() => "It is on record."}
    >
      <Fields />
    </PartForm>
  );
}

function Fields() {
  const { register, formState } = useFormContext<RemarkDraft>();
  const { errors } = formState;
  return (
    <>
      <Choice label="This is" error={errors.kind?.message} {...register("kind")}>
        <option value="question">a question</option>
        <option value="objection">an objection</option>
        <option value="answer">an answer</option>
      </Choice>
      <TextArea label="In words" error={errors.text?.message} {...register("text")} />
    </>
  );
}
