import * as z from "zod";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import { canonicalJson } from "@weighhouse/ledger/canonical";
import { enter } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { invalid } from "./desk-error";
import { parseInput } from "./parse-input";
import { recordEntries } from "./record-entries";
import { isPast, timeAt } from "./time";

export const amendCampaignInput = z.strictObject({
  key: z.string(),
  /** All of the campaign's own fields, in their new version. */
  campaign: payloadSchemas["campaign.amended"],
});

/** Changes the campaign's own fields. The rule stays as it is once a measurement is there. */
export async function amendCampaign(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof amendCampaignInput>,
): Promise<Appended> {
  const { key, campaign } = parseInput(amendCampaignInput, input);
  const access = await enter(desk, actor, key, "amend-campaign");
  if (campaign.key !== key)
    throw refused("/campaign/key", campaign.key, `${key}: keys never change`);
  const stored = await recordEntries(desk, access, ({ document }) => {
    const before = document.campaign;
    const changes = canonicalJson(campaign.rule) !== canonicalJson(before.rule);
    if (changes && document.measurements.length > 0) {
      const rule = JSON.stringify(before.rule);
      throw refused(
        "/campaign/rule",
        JSON.stringify(campaign.rule),
        `${rule}: a measurement is there`,
      );
    }
    const closed = before.registrationCloses;
    if (isPast(closed, timeAt(desk)) && campaign.registrationCloses !== closed) {
      const found = campaign.registrationCloses ?? "no date";
      throw refused("/campaign/registrationCloses", found, `${closed}: registration is closed`);
    }
    return { entries: [{ kind: "campaign.amended", payload: campaign }], fields: [] };
  });
  return appended(key, stored);
}

function refused(pointer: string, found: string, allowed: string) {
  return invalid([{ pointer, code: "contradiction", found, allowed }]);
}
