import * as z from "zod";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import { enter, requireTeam } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import { checkAfter } from "./check-after";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { authorOf, recordEntries } from "./record-entries";
import { timeAt } from "./time";

export const proposeMeasurandInput = z.strictObject({
  key: z.string(),
  ...payloadSchemas["measurand.proposed"].shape,
});

/**
 * Proposes a quantity that nobody declared. The coordinator declares it, or answers with a reason; it
 * has to be one that could be declared as it stands.
 */
export async function proposeMeasurand(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof proposeMeasurandInput>,
): Promise<Appended> {
  const { key, ...payload } = parseInput(proposeMeasurandInput, input);
  const access = await enter(desk, actor, key, "propose-measurand");
  requireTeam(access, "propose-measurand");
  const { measurand } = payload;
  const stored = await recordEntries(desk, access, ({ parts, size }) => {
    checkAfter(parts, [{ kind: "measurand.declared", payload: measurand }], {
      by: authorOf(access),
      at: timeAt(desk),
      size,
      fields: [{ list: "measurands", key: measurand.key, pointer: "/measurand" }],
    });
    return { entries: [{ kind: "measurand.proposed", payload }], fields: [] };
  });
  return appended(key, stored);
}
