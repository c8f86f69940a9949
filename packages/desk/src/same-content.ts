import type { Measurement } from "@weighhouse/campaign/document";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { canonicalJson } from "@weighhouse/ledger/canonical";

/** Whether a content says what the document says already; a unit left out is the observable's. */
export function sameContent(content: MeasurementContent, there: Measurement): boolean {
  const { claimed: _, ...said } = content;
  return Object.entries(said).every(([field, value]) => {
    const before = there[field as keyof Measurement];
    if (value === null && (field === "unit" || field === "setAside")) return true;
    return canonicalJson(value ?? null) === canonicalJson(before ?? null);
  });
}
