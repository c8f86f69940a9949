import type { CampaignView } from "@/server/campaign";
import { hasPassed } from "../has-passed";

export interface Registrant {
  name: string;
  team: string | null;
  /** What is registered now is marked as filed after data. */
  registrationClosed: boolean;
}

/** Who registers here, and for which team; null for those who may not. */
export function registrantOf(
  view: Pick<CampaignView, "role" | "team" | "document">,
  actor: { name: string } | null,
): Registrant | null {
  if (actor === null || (view.role !== "member" && view.role !== "coordinator")) return null;
  return {
    name: actor.name,
    team: view.team,
    registrationClosed: hasPassed(view.document.campaign.registrationCloses),
  };
}
