"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { payloadSchemas, type Payload } from "@weighhouse/campaign/entries";
import { useMemo } from "react";
import { useFormContext } from "react-hook-form";
import { Choice, Field } from "@/look/field";
import { useTRPCClient } from "@/trpc/client";
import { problemsInCampaign } from "../check-in-campaign";
import { FieldRow } from "../form-frame";
import { formSchema } from "../form-schema";
import { emptySharedError, sharedErrorContent, type SharedErrorDraft } from "./part-drafts";
import { PartForm } from "./part-form";
import { TitleAndKey } from "./title-and-key";

export function SharedErrorForm({ document }: { document: CampaignDocument }) {
  const client = useTRPCClient();
  const { key } = document.campaign;
  const schema = useMemo(
    () =>
      formSchema<SharedErrorDraft, Payload<"shared-error.declared">>({
        schema: payloadSchemas["shared-error.declared"],
        content: sharedErrorContent,
        further: (part) => problemsInCampaign(document, { list: "sharedErrors", part }),
      }),
    [document],
  );
  return (
    <PartForm
      name={`shared-error:${key}`}
      label="Declare a shared error"
      button="Declare shared error"
      defaults={emptySharedError}
      schema={schema}
      under={/^\/sharedErrors?(\/\d+)?(?=\/|$)/}
      send={(sharedError) => client.declare.sharedError.mutate({ key, sharedError })}
      done={({ title }) => `“${title}” is declared. Measurements can name it.`}
    >
      <Fields />
    </PartForm>
  );
}

function Fields() {
  const { register, formState } = useFormContext<SharedErrorDraft>();
  const { errors } = formState;
  return (
    <>
      <TitleAndKey titleHelp="What several measurements have wrong together: “Zero point of the new camera”." />
      <FieldRow>
        <Field
          label="Size"
          gloss="standard deviation"
          help="In the unit of the quantities that it touches; dex on a log10 scale."
          inputMode="decimal"
          autoComplete="off"
          error={errors.sd?.message}
          {...register("sd")}
        />
        <Choice
          label="The same error for"
          help="Each batch: a new draw for every batch that measurements name, such as a night."
          error={errors.per?.message}
          {...register("per")}
        >
          <option value="campaign">the whole campaign</option>
          <option value="batch">each batch</option>
        </Choice>
      </FieldRow>
    </>
  );
}
