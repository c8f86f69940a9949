import type { CampaignDocument } from "@weighhouse/campaign/document";
import { measurementContentSchema, type MeasurementContent } from "@weighhouse/campaign/entries";
import { line } from "@weighhouse/campaign/fields";
import { z } from "zod";
import { numberToText, timeToText } from "../entered-text";
import {
  emptyMeasurement,
  measurementContent,
  type MeasurementDraft,
} from "../post/measurement-draft";

/** A correction as the form holds it: the measurement's fields, and why they change. */
export interface CorrectionDraft extends MeasurementDraft {
  reason: string;
}

export const correctionSchema = z.strictObject({
  measurement: measurementContentSchema,
  reason: line,
});
export type Correction = z.output<typeof correctionSchema>;

/** A measurement with one value and one uncertainty, which the form's fields can show. */
export function isPlain({ value, sd, plus, limit, sdDex, noise }: MeasurementContent): boolean {
  return value !== null && sd !== null && [plus, limit, sdDex, noise].every((one) => one === null);
}

export function draftOfMeasurement(
  document: CampaignDocument,
  measurement: MeasurementContent,
): CorrectionDraft {
  return {
    ...emptyMeasurement(document),
    measurand: measurement.measurand,
    facility: measurement.facility ?? "",
    observedAt: timeToText(measurement.observedAt),
    value: numberToText(measurement.value),
    sd: numberToText(measurement.sd),
    unit: measurement.unit ?? "",
    batch: measurement.batch ?? "",
    status: measurement.status,
    source: measurement.source ?? "",
    sameData: measurement.sameData ?? "",
    id: measurement.id,
    shared: measurement.shared.map(({ error, coefficient }) => ({
      error,
      coefficient: numberToText(coefficient),
    })),
    reason: "",
  };
}

/** What the form says anew, on what it doesn't show. */
export function correctionContent(measurement: MeasurementContent, draft: CorrectionDraft) {
  const { id } = measurement;
  return {
    measurement: { ...measurement, ...measurementContent(draft), id },
    reason: draft.reason.trim(),
  };
}
