"use client";

import { line } from "@weighhouse/campaign/fields";
import { useFormContext } from "react-hook-form";
import { z } from "zod";
import { Field } from "@/look/field";
import { PartForm } from "../declare/part-form";
import { formSchema } from "../form-schema";

interface ReasonDraft {
  reason: string;
}
type Reason = { reason: string };

const empty: ReasonDraft = { reason: "" };
const schema = formSchema<ReasonDraft, Reason>({
  schema: z.strictObject({ reason: line }),
  content: ({ reason }) => ({ reason: reason.trim() }),
});

/** Something that is done for a stated reason and stays on record with it. */
export function ReasonForm(props: {
  /** Names the kept draft and the form: `withdraw:CAMPAIGN:ID`. */
  name: string;
  label: string;
  button: string;
  help: string;
  done: string;
  send: (reason: string) => Promise<unknown>;
}) {
  return (
    <PartForm
      name={props.name}
      label={props.label}
      button={props.button}
      defaults={empty}
      schema={schema}
      send={({ reason }) => props.send(reason)}
      done={() => props.done}
    >
      <ReasonField help={props.help} />
    </PartForm>
  );
}

function ReasonField({ help }: { help: string }) {
  const { register, formState } = useFormContext<ReasonDraft>();
  return (
    <Field
      label="Reason"
      help={help}
      autoComplete="off"
      error={formState.errors.reason?.message}
      {...register("reason")}
    />
  );
}
