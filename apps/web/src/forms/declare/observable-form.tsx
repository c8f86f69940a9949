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
import { emptyObservable, observableContent, type ObservableDraft } from "./part-drafts";
import { PartForm } from "./part-form";
import { TitleAndKey } from "./title-and-key";

export function ObservableForm({ document }: { document: CampaignDocument }) {
  const client = useTRPCClient();
  const { key } = document.campaign;
  const schema = useMemo(
    () =>
      formSchema<ObservableDraft, Payload<"observable.declared">>({
        schema: payloadSchemas["observable.declared"],
        content: observableContent,
        further: (part) => problemsInCampaign(document, { list: "observables", part }),
      }),
    [document],
  );
  return (
    <PartForm
      name={`observable:${key}`}
      label="Declare an observable"
      button="Declare observable"
      defaults={emptyObservable}
      schema={schema}
      under={/^\/observables?(\/\d+)?(?=\/|$)/}
      send={(observable) => client.declare.observable.mutate({ key, observable })}
      done={({ title }) => `“${title}” is declared. Next: a quantity that it is measured as.`}
    >
      <Fields />
    </PartForm>
  );
}

function Fields() {
  const { register, formState } = useFormContext<ObservableDraft>();
  const { errors } = formState;
  return (
    <>
      <TitleAndKey titleHelp="A kind of quantity: “Surface brightness in blue light”." />
      <FieldRow>
        <Field
          label="Unit"
          help="Such as arcsec, kg/s, mW/m^2; 1 for a plain number."
          autoComplete="off"
          error={errors.unit?.message}
          {...register("unit")}
        />
        <Choice
          label="Scale"
          help="Where differences count: values themselves, or factors."
          error={errors.scale?.message}
          {...register("scale")}
        >
          <option value="linear">linear: differences</option>
          <option value="log10">log10: factors, positive values only</option>
        </Choice>
      </FieldRow>
    </>
  );
}
