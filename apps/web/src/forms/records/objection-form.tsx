"use client";

import { payloadSchemas } from "@weighhouse/campaign/entries";
import { useFormContext } from "react-hook-form";
import type { z } from "zod";
import { TextArea } from "@/look/field";
import { useTRPCClient } from "@/trpc/client";
import { PartForm } from "../declare/part-form";
import { formSchema } from "../form-schema";

interface ObjectionDraft {
  reason: string;
}

const empty: ObjectionDraft = { reason: "" };
const objection = payloadSchemas["reference.objected"].omit({ measurand: true });
const schema = formSchema<ObjectionDraft, z.output<typeof objection>>({
  schema: objection,
  content: ({ reason }) => ({ reason: reason.trim() }),
});

/** A team's objection to a no-model range, while it can still be put right. */
export function ObjectionForm(props: { campaign: string; measurand: string }) {
  const client = useTRPCClient();
  const { campaign: key, measurand } = props;
  return (
    <PartForm
      name={`object:${key}:${measurand}`}
      label="Object to the no-model range"
      button="Object"
      defaults={empty}
      schema={schema}
      send={({ reason }) => client.declare.objectToReference.mutate({ key, measurand, reason })}
      done={() => "Your team’s objection is on record. The coordinator answers it."}
    >
      <Fields />
    </PartForm>
  );
}

function Fields() {
  const { register, formState } = useFormContext<ObjectionDraft>();
  return (
    <TextArea
      label="What is wrong with it"
      help="Silence is charged this range: too wide, and silence costs too much; too narrow, and it costs too little."
      error={formState.errors.reason?.message}
      {...register("reason")}
    />
  );
}
