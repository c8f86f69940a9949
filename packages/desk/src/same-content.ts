import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { canonicalJson } from "@weighhouse/ledger/canonical";

/** A field that a content has otherwise than what is there. */
export type FieldChange = { field: string; before: unknown; after: unknown };

type Units = Pick<CampaignDocument, "observables" | "measurands">;

/** Where a content differs from what is there. Without a unit either is in the observable's. */
export function differingFields(
  content: MeasurementContent,
  there: Measurement,
  units: Units,
): FieldChange[] {
  const { claimed: _, ...said } = content;
  return Object.entries(said).flatMap(([field, value]) => {
    // What is set aside stays so when it is corrected.
    if (value === null && field === "setAside") return [];
    const before = fieldOf(there, field, units);
    const after = fieldOf(said, field, units);
    return canonicalJson(after) === canonicalJson(before) ? [] : [{ field, before, after }];
  });
}

function fieldOf(of: { measurand: string }, field: string, units: Units): unknown {
  const value = (of as Record<string, unknown>)[field] ?? null;
  if (field !== "unit" || value !== null) return value;
  const observable = units.measurands.find(({ key }) => key === of.measurand)?.observable;
  return units.observables.find(({ key }) => key === observable)?.unit ?? null;
}
