import * as z from "zod";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import { enter, requireTeam } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { parseInput } from "./parse-input";
import { recordEntries } from "./record-entries";
import { isPast, timeAt } from "./time";

export const objectToReferenceInput = z.strictObject({
  key: z.string(),
  ...payloadSchemas["reference.objected"].shape,
});

/** Puts a team's objection to a measurand's reference on record, before registration closes. */
export async function objectToReference(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof objectToReferenceInput>,
): Promise<Appended> {
  const { key, ...payload } = parseInput(objectToReferenceInput, input);
  const access = await enter(desk, actor, key, "object-to-reference");
  requireTeam(access, "object-to-reference");
  const stored = await recordEntries(desk, access, ({ document }) => {
    const closes = document.campaign.registrationCloses;
    if (isPast(closes, timeAt(desk))) {
      throw new DeskError(
        "closed",
        `found registration closed since ${closes}; objections come before`,
      );
    }
    return { entries: [{ kind: "reference.objected", payload }], fields: [] };
  });
  return appended(key, stored);
}
