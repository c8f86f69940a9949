import type { CampaignDocument } from "@weighhouse/campaign/document";

/** The coordinator's parts, in the order in which a campaign is declared. */
export const parts = [
  "observables",
  "quantities",
  "shared-errors",
  "facilities",
  "teams",
  "campaign",
  "registration",
] as const;
export type Part = (typeof parts)[number];

export const partTitles: Record<Part, string> = {
  observables: "Observables",
  quantities: "Quantities",
  "shared-errors": "Shared errors",
  facilities: "Facilities",
  teams: "Teams",
  campaign: "Title, rule and dates",
  registration: "Close registration",
};

export function partFrom(text: string): Part | null {
  return parts.find((part) => part === text) ?? null;
}

/** How many of a part there are; null where it is no list. */
export function countOf(document: CampaignDocument, part: Part): number | null {
  switch (part) {
    case "observables":
      return document.observables.length;
    case "quantities":
      return document.measurands.length;
    case "shared-errors":
      return document.sharedErrors.length;
    case "facilities":
      return document.facilities.length;
    case "teams":
      return document.teams.length;
    default:
      return null;
  }
}

/** Where to go on: the first part that a campaign can't do without and has none of. */
export function firstMissing(document: CampaignDocument): Part {
  const needed: Part[] = ["observables", "quantities", "facilities", "teams"];
  return needed.find((part) => countOf(document, part) === 0) ?? "quantities";
}
