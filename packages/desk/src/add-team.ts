import * as z from "zod";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import { enter } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { refuseTaken } from "./declared-parts";
import { parseInput } from "./parse-input";
import { recordEntries } from "./record-entries";

export const addTeamInput = z.strictObject({
  key: z.string(),
  team: payloadSchemas["team.joined"],
});

/** Lets a team into the campaign; its people are added as members. */
export async function addTeam(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof addTeamInput>,
): Promise<Appended> {
  const { key, team } = parseInput(addTeamInput, input);
  const access = await enter(desk, actor, key, "add-team");
  const field = { list: "teams", key: team.key, pointer: "/team" } as const;
  const stored = await recordEntries(desk, access, ({ document }) => {
    refuseTaken(document, field);
    return { entries: [{ kind: "team.joined", payload: team }], fields: [field] };
  });
  return appended(key, stored);
}
