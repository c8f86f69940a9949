import * as z from "zod";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import * as store from "@weighhouse/store/campaigns";
import type { CampaignSummary } from "@weighhouse/store/campaigns";
import { findMembership } from "@weighhouse/store/members";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { roleOf } from "./access";
import type { Role } from "./roles";

export const listCampaignsInput = z.strictObject({});

/** A campaign as the list shows it, with what the actor is in it. */
export type ListedCampaign = CampaignSummary & { role: Role; team: string | null };

/** The campaigns that the actor may see: the public ones, and those with a place for the actor. */
export async function listCampaigns(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof listCampaignsInput> = {},
): Promise<ListedCampaign[]> {
  parseInput(listCampaignsInput, input);
  const userId = actor?.userId ?? null;
  const listed = await store.listCampaigns(desk.store, { userId, engine: ENGINE_VERSION });
  return Promise.all(
    listed.map(async (campaign) => {
      const place =
        userId === null
          ? null
          : await findMembership(desk.store, { campaign: campaign.key, userId });
      return {
        ...campaign,
        role: roleOf(actor, campaign.visibility, place),
        team: place?.team ?? null,
      };
    }),
  );
}
