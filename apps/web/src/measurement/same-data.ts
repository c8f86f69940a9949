import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { MeasurementContent } from "@weighhouse/campaign/entries";

type Content = Measurement | MeasurementContent;

export interface Difference {
  field: string;
  /** As they stand in the measurement, in words; null where the field is absent. */
  here: string | null;
  there: string | null;
}

/** Everything that was made of the same data, in the order in which it was posted. */
export function sameDataAs(document: CampaignDocument, measurement: Content): Measurement[] {
  if (measurement.sameData === null) return [];
  return document.measurements.filter(({ sameData }) => sameData === measurement.sameData);
}

/** What is said of one and of the other in other words, results and ids apart. */
export function differences(here: Content, there: Content): Difference[] {
  const fields = [...plainFields, ...records] as const;
  return fields.flatMap((field) => {
    const parts = isRecord(field) ? memberDifferences(field, here, there) : [];
    if (isRecord(field)) return parts;
    const pair = { here: words(here[field]), there: words(there[field]) };
    return pair.here === pair.there ? [] : [{ field, ...pair }];
  });
}

const plainFields = [
  "measurand",
  "facility",
  "team",
  "batch",
  "observedAt",
  "status",
  "unit",
  "limit",
  "confidence",
  "sigmas",
  "noise",
  "efficiency",
  "falseAlarm",
  "exposure",
  "background",
  "source",
  "shared",
] as const;
const records = ["conditions", "extra"] as const;

function isRecord(field: string): field is (typeof records)[number] {
  return (records as readonly string[]).includes(field);
}

function memberDifferences(
  field: (typeof records)[number],
  here: Content,
  there: Content,
): Difference[] {
  const names = [...new Set([...Object.keys(here[field]), ...Object.keys(there[field])])];
  return names.flatMap((name) => {
    const pair = { here: words(here[field][name]), there: words(there[field][name]) };
    return pair.here === pair.there ? [] : [{ field: name, ...pair }];
  });
}

function words(value: unknown): string | null {
  if (value === null || value === undefined) return null;
  if (Array.isArray(value)) {
    const parts = value as { error: string; coefficient: number }[];
    return parts.length === 0
      ? null
      : parts.map(({ error, coefficient }) => `${error} × ${coefficient}`).join(", ");
  }
  return typeof value === "object" ? JSON.stringify(value) : String(value);
}
