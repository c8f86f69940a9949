"use client";

import { payloadSchemas } from "@weighhouse/campaign/entries";
import { useFormContext } from "react-hook-form";
import type { z } from "zod";
import { TextArea } from "@/look/field";
import { useTRPCClient } from "@/trpc/client";
import { PartForm } from "../declare/part-form";
import { formSchema } from "../form-schema";

interface AnswerDraft {
  text: string;
}

const empty: AnswerDraft = { text: "" };
const answer = payloadSchemas["remark.made"].pick({ text: true });
const schema = formSchema<AnswerDraft, z.output<typeof answer>>({
  schema: answer,
  content: ({ text }) => ({ text: text.trim() }),
});

/** The coordinator's answer to a proposal or an objection. */
export function AnswerForm({ campaign, on }: { campaign: string; on: number }) {
  const client = useTRPCClient();
  return (
    <PartForm
      name={`answer:${campaign}:${on}`}
      label={`Answer entry ${on}`}
      button="Answer"
      defaults={empty}
      schema={schema}
      send={({ text }) => client.ledger.remark.mutate({ key: campaign, on, kind: "answer", text })}
      done={() => "The answer is on record."}
    >
      <Fields />
    </PartForm>
  );
}

function Fields() {
  const { register, formState } = useFormContext<AnswerDraft>();
  return <TextArea label="Answer" error={formState.errors.text?.message} {...register("text")} />;
}
