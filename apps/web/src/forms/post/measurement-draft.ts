import type { CampaignDocument } from "@weighhouse/campaign/document";
import { measurementFields } from "@weighhouse/campaign/measurement";
import { measurementId, optional } from "@weighhouse/campaign/fields";
import { z } from "zod";
import { numberFromText, textOrNull, timeFromText } from "../entered-text";

interface LoadingDraft {
  error: string;
  coefficient: string;
}

/** What the form holds of one measurement: text as typed. */
export interface MeasurementDraft {
  measurand: string;
  facility: string;
  observedAt: string;
  value: string;
  sd: string;
  unit: string;
  batch: string;
  status: "final" | "provisional";
  source: string;
  sameData: string;
  id: string;
  shared: LoadingDraft[];
}

export function emptyMeasurement(document: CampaignDocument): MeasurementDraft {
  return {
    measurand: document.measurands.length === 1 ? (document.measurands[0]?.key ?? "") : "",
    facility: document.facilities.length === 1 ? (document.facilities[0]?.key ?? "") : "",
    observedAt: "",
    value: "",
    sd: "",
    unit: "",
    batch: "",
    status: "final",
    source: "",
    sameData: "",
    id: "",
    shared: [],
  };
}

/** As the server reads a measurement, but for the id, which it makes where none is given. */
export const measurementSchema = z.strictObject({
  ...measurementFields,
  id: optional(measurementId),
  // What a form for one value asks for; a file may leave out what other results don't need.
  value: z.number(),
  sd: z.number().positive(),
});
export type MeasurementOfForm = z.output<typeof measurementSchema>;

export function measurementContent(draft: MeasurementDraft): Record<string, unknown> {
  return {
    measurand: draft.measurand,
    facility: textOrNull(draft.facility),
    observedAt: timeFromText(draft.observedAt),
    value: numberFromText(draft.value),
    sd: numberFromText(draft.sd),
    unit: textOrNull(draft.unit),
    batch: textOrNull(draft.batch),
    status: draft.status,
    source: textOrNull(draft.source),
    sameData: textOrNull(draft.sameData),
    id: textOrNull(draft.id),
    shared: draft.shared.map(({ error, coefficient }) => ({
      error,
      coefficient: numberFromText(coefficient) ?? 1,
    })),
  };
}

/** A draft for the server: only what is there, so that it fills its own defaults. */
export function measurementDraft(content: MeasurementOfForm): Record<string, unknown> {
  return Object.fromEntries(Object.entries(content).filter(([, value]) => value !== null));
}
