import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Field } from "./check-after";
import { DeskError, invalid } from "./desk-error";

export type DeclaredField = Field & { list: Keyed };

type Keyed =
  "observables" | "measurands" | "derived" | "sharedErrors" | "facilities" | "teams" | "hypotheses";

/** Refuses a key that something in the list has already: a declaration is never overwritten. */
export function refuseTaken(document: CampaignDocument, field: DeclaredField): void {
  const rivals: { key: string }[] =
    // Measurands and derived values share one list of keys.
    field.list === "measurands" || field.list === "derived"
      ? [...document.measurands, ...document.derived]
      : document[field.list];
  if (!rivals.some(({ key }) => key === field.key)) return;
  throw invalid([
    {
      pointer: `${field.pointer}/key`,
      code: "duplicate",
      found: field.key,
      allowed: "a key that nothing in the campaign has yet",
    },
  ]);
}

/** The measurand of that key. */
export function measurandOf(document: CampaignDocument, key: string) {
  const found = document.measurands.find((one) => one.key === key);
  if (!found) throw new DeskError("not-found", `found no measurand ${key} in the campaign`);
  return found;
}

/** The hypothesis of that key. */
export function hypothesisOf(document: CampaignDocument, key: string) {
  const found = document.hypotheses.find((one) => one.key === key);
  if (!found) throw new DeskError("not-found", `found no hypothesis ${key} in the campaign`);
  return found;
}

/** The measurement of that id. */
export function measurementOf(document: CampaignDocument, id: string) {
  const found = document.measurements.find((one) => one.id === id);
  if (!found) throw new DeskError("not-found", `found no measurement ${id} in the campaign`);
  return found;
}
