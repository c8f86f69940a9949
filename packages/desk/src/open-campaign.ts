import * as z from "zod";
import { campaignSchema } from "@weighhouse/campaign/declarations";
import { visibilities } from "@weighhouse/campaign/entries";
import { defaulted } from "@weighhouse/campaign/fields";
import { openCampaign as storeCampaign } from "@weighhouse/store/open-campaign";
import { requireAccount } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { onStore } from "./store-refusals";

export const openCampaignInput = z.strictObject({
  campaign: campaignSchema,
  visibility: defaulted(z.enum(visibilities), "public" as const),
});

/** Opens a campaign with a ledger of its own; the actor becomes its coordinator. */
export async function openCampaign(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof openCampaignInput>,
): Promise<Appended> {
  const { campaign, visibility } = parseInput(openCampaignInput, input);
  const { userId } = requireAccount(actor, "open-campaign");
  const opened = await onStore(() =>
    storeCampaign(desk.store, {
      coordinator: userId,
      campaign: { ...campaign, visibility },
      clock: desk.clock,
    }),
  );
  return appended(campaign.key, opened);
}
