"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { measurementContentSchema, type MeasurementContent } from "@weighhouse/campaign/entries";
import { time } from "@weighhouse/campaign/fields";
import { useMemo } from "react";
import { z } from "zod";
import { useTRPCClient } from "@/trpc/client";
import { PartForm } from "../declare/part-form";
import { timeFromText } from "../entered-text";
import { formSchema } from "../form-schema";
import {
  emptyMeasurement,
  measurementContent,
  type MeasurementDraft,
} from "../post/measurement-draft";
import { MeasurementFields } from "../post/measurement-fields";
import { keepSealed } from "./keep-file";
import { KeepingFields, type KeepingDraft } from "./keeping-fields";

interface SealDraft extends MeasurementDraft, KeepingDraft {}

const contentSchema = z.strictObject({
  until: time,
  keeping: z.enum(["held", "kept"]),
  measurement: measurementContentSchema,
});
type SealContent = { until: string; keeping: "held" | "kept"; measurement: MeasurementContent };

/** Seals a measurement: that there is one is public, what it says is not yet. */
export function SealMeasurementForm(props: {
  document: CampaignDocument;
  ledger: string;
  team: string | null;
}) {
  const { document, ledger, team } = props;
  const client = useTRPCClient();
  const { key } = document.campaign;
  const defaults = useMemo(
    (): SealDraft => ({ ...emptyMeasurement(document), keeping: "held", until: "" }),
    [document],
  );
  return (
    <PartForm
      name={`seal-measurement:${key}`}
      label="Seal a measurement"
      button="Seal measurement"
      defaults={defaults}
      schema={schema}
      under={/^\/seal(?=\/|$)/}
      field={fieldOf}
      send={async ({ until, keeping, measurement }) => {
        if (keeping === "held")
          return client.seals.measurement.mutate({ key, until, seal: { keeping, measurement } });
        const bound = { campaign: key, ledger, team, hypothesis: null, until };
        const { digest, measurand } = keepSealed({ ...bound, prediction: null, measurement });
        return client.seals.measurement.mutate({
          key,
          until,
          seal: { keeping, digest, measurand },
        });
      }}
      done={({ keeping }) =>
        keeping === "held"
          ? "It is sealed, and will be opened by itself."
          : "It is sealed. Keep the file that was saved: only with it can you open the seal."
      }
    >
      <MeasurementFields document={document} idNeeded />
      <KeepingFields />
    </PartForm>
  );
}

const schema = formSchema<SealDraft, SealContent>({
  schema: contentSchema as z.ZodType<SealContent>,
  content: (draft) => ({
    until: timeFromText(draft.until),
    keeping: draft.keeping,
    measurement: measurementContent(draft),
  }),
  field: fieldOf,
});

function fieldOf(_draft: SealDraft, path: readonly (string | number)[]): string {
  return (path[0] === "measurement" ? path.slice(1) : path).join(".");
}
