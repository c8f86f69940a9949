"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { parseJson } from "@weighhouse/campaign/json-text";
import { useMemo } from "react";
import { useFormContext } from "react-hook-form";
import { Field, TextArea } from "@/look/field";
import { useTRPCClient } from "@/trpc/client";
import { PartForm } from "../declare/part-form";
import { formSchema } from "../form-schema";
import { correctionSchema, type Correction } from "./correction-draft";

interface JsonDraft {
  json: string;
  reason: string;
}

/** For limits, events, counts and the like: the measurement as JSON, as the ledger holds it. */
export function CorrectAsJson(props: {
  document: CampaignDocument;
  measurement: MeasurementContent;
}) {
  const client = useTRPCClient();
  const { key } = props.document.campaign;
  const { measurement } = props;
  const defaults = useMemo(() => ({ json: shown(measurement), reason: "" }), [measurement]);
  return (
    <PartForm
      name={`correct-json:${key}:${measurement.id}`}
      label="Correct this measurement"
      button="Correct measurement"
      defaults={defaults}
      schema={schema}
      field={(_draft, path) => fieldOf(path)}
      send={(correction) => client.measurements.correct.mutate({ key, ...correction })}
      done={() => "It is corrected; what it was before stays in its history."}
    >
      <Fields />
    </PartForm>
  );
}

const schema = formSchema<JsonDraft, Correction>({
  schema: correctionSchema,
  content: ({ json, reason }) => ({ measurement: parseJson(json).value, reason: reason.trim() }),
  field: (_draft, path) => fieldOf(path),
  further: async (content) => {
    const { measurement } = content as { measurement: unknown };
    return measurement === undefined
      ? [{ pointer: "/measurement", code: "syntax", found: "no JSON", allowed: "a JSON object" }]
      : [];
  },
});

function Fields() {
  const { register, formState } = useFormContext<JsonDraft>();
  const { errors } = formState;
  return (
    <>
      <TextArea
        label="The measurement"
        gloss="JSON, as the ledger holds it"
        rows={12}
        spellCheck={false}
        className="font-mono text-[13px]"
        error={errors.json?.message}
        {...register("json")}
      />
      <Field
        label="Reason"
        help="What was wrong. It stands in the ledger beside the correction."
        autoComplete="off"
        error={errors.reason?.message}
        {...register("reason")}
      />
    </>
  );
}

function fieldOf(path: readonly (string | number)[]): string {
  return path[0] === "measurement" ? "json" : path.join(".");
}

/** Without what is absent, which a reader would have to look past. */
function shown(measurement: MeasurementContent): string {
  const said = Object.entries(measurement).filter(([, value]) => value !== null);
  return JSON.stringify(Object.fromEntries(said), null, 2);
}
