"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { payloadSchemas, type Payload } from "@weighhouse/campaign/entries";
import { useMemo } from "react";
import { useFormContext, useWatch } from "react-hook-form";
import { Choice, Field } from "@/look/field";
import { unitText } from "@/look/unit-text";
import { useTRPCClient } from "@/trpc/client";
import { problemsInCampaign } from "../check-in-campaign";
import { FieldRow } from "../form-frame";
import { formSchema } from "../form-schema";
import {
  emptyMeasurand,
  measurandContent,
  measurandField,
  type MeasurandDraft,
} from "./part-drafts";
import { PartForm } from "./part-form";
import { ReferenceFields } from "./reference-fields";
import { ThresholdFields } from "./threshold-fields";
import { TitleAndKey } from "./title-and-key";

export function MeasurandForm({ document }: { document: CampaignDocument }) {
  const client = useTRPCClient();
  const { key } = document.campaign;
  const defaults = useMemo(() => emptyMeasurand(document), [document]);
  const schema = useMemo(
    () =>
      formSchema<MeasurandDraft, Payload<"measurand.declared">>({
        schema: payloadSchemas["measurand.declared"],
        content: measurandContent,
        field: measurandField,
        further: (part) => problemsInCampaign(document, { list: "measurands", part }),
      }),
    [document],
  );
  return (
    <PartForm
      name={`measurand:${key}`}
      label="Declare a quantity"
      button="Declare quantity"
      defaults={defaults}
      schema={schema}
      under={/^\/measurands?(\/\d+)?(?=\/|$)/}
      field={measurandField}
      send={(measurand) => client.declare.measurand.mutate({ key, measurand })}
      done={({ title }) => `“${title}” is declared. Teams can predict it now.`}
    >
      <MeasurandFields document={document} />
    </PartForm>
  );
}

/** The fields of a quantity, as it is declared or proposed. */
export function MeasurandFields({ document }: { document: CampaignDocument }) {
  const { register, formState } = useFormContext<MeasurandDraft>();
  const { errors } = formState;
  const chosen = useWatch<MeasurandDraft, "observable">({ name: "observable" });
  const observable = document.observables.find(({ key }) => key === chosen);
  const unit = observable?.unit ? unitText(observable.unit) : null;
  const spread = observable?.scale === "log10" ? "dex" : unit;
  return (
    <>
      <TitleAndKey titleHelp="What exactly is predicted and measured: “Brightness in May”." />
      <FieldRow>
        <Choice
          label="Observable"
          help="The kind of quantity, with its unit and scale."
          error={errors.observable?.message}
          {...register("observable")}
        >
          {document.observables.map(({ key, title, unit: own }) => (
            <option key={key} value={key}>
              {own === null ? title : `${title} (${unitText(own)})`}
            </option>
          ))}
        </Choice>
        <Field
          label="Window from"
          help="UTC. Empty: no beginning."
          autoComplete="off"
          error={errors.window?.from?.message}
          {...register("window.from")}
        />
        <Field
          label="Window to"
          help="UTC. Empty: no end."
          autoComplete="off"
          error={errors.window?.to?.message}
          {...register("window.to")}
        />
        <Field
          label="Scatter of the target"
          gloss={spread ?? undefined}
          help="Its own flicker about one true value; 0 if steady."
          inputMode="decimal"
          autoComplete="off"
          error={errors.scatter?.message}
          {...register("scatter")}
        />
      </FieldRow>
      <ReferenceFields unit={unit} spread={spread} />
      <ThresholdFields unit={unit} />
    </>
  );
}
