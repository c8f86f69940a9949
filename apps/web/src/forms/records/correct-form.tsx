"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { useMemo } from "react";
import { useFormContext } from "react-hook-form";
import { Field } from "@/look/field";
import { useTRPCClient } from "@/trpc/client";
import { PartForm } from "../declare/part-form";
import { formSchema } from "../form-schema";
import { MeasurementFields } from "../post/measurement-fields";
import {
  correctionContent,
  correctionSchema,
  draftOfMeasurement,
  type Correction,
  type CorrectionDraft,
} from "./correction-draft";

interface Props {
  document: CampaignDocument;
  measurement: MeasurementContent;
}

/** Gives a measurement new content; what it was stays on record, with the reason. */
export function CorrectForm({ document, measurement }: Props) {
  const client = useTRPCClient();
  const { key } = document.campaign;
  const defaults = useMemo(
    () => draftOfMeasurement(document, measurement),
    [document, measurement],
  );
  const schema = useMemo(
    () =>
      formSchema<CorrectionDraft, Correction>({
        schema: correctionSchema,
        content: (draft) => correctionContent(measurement, draft),
        field: (_draft, path) => fieldOf(path),
      }),
    [measurement],
  );
  return (
    <PartForm
      name={`correct:${key}:${measurement.id}`}
      label="Correct this measurement"
      button="Correct measurement"
      defaults={defaults}
      schema={schema}
      field={(_draft, path) => fieldOf(path)}
      send={(correction) => client.measurements.correct.mutate({ key, ...correction })}
      done={() => "It is corrected; what it was before stays in its history."}
    >
      <MeasurementFields document={document} fixedId />
      <Reason />
    </PartForm>
  );
}

function Reason() {
  const { register, formState } = useFormContext<CorrectionDraft>();
  return (
    <Field
      label="Reason"
      help="What was wrong. It stands in the ledger beside the correction."
      autoComplete="off"
      error={formState.errors.reason?.message}
      {...register("reason")}
    />
  );
}

function fieldOf(path: readonly (string | number)[]): string {
  return (path[0] === "measurement" ? path.slice(1) : path).join(".");
}
