import * as z from "zod";
import type { ProblemCode } from "@weighhouse/campaign/problem";
import { addMember as storeMember, listMembers, roles } from "@weighhouse/store/members";
import type { Membership } from "@weighhouse/store/members";
import { readDocument } from "@weighhouse/store/read-document";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { invalid } from "./desk-error";
import type { DeskError } from "./desk-error";
import { parseInput } from "./parse-input";
import { onStore } from "./store-refusals";

export const addMemberInput = z.strictObject({
  key: z.string(),
  email: z.email({ error: "an e-mail address" }),
  role: z.enum(roles),
  team: z.string().nullish(),
});

/**
 * Gives somebody with an account here a place in the campaign, or another place than before. A
 * member may be of a team, a coordinator too; a member of none is an observer, who posts
 * measurements and registers nothing. A reader is of none.
 */
export async function addMember(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof addMemberInput>,
): Promise<Membership> {
  const { key, email, role, team = null } = parseInput(addMemberInput, input);
  await enter(desk, actor, key, "add-member");
  const { document } = await onStore(() => readDocument(desk.store, key));
  refuseTeam(
    role,
    team,
    document.teams.map((each) => each.key),
  );
  await refuseLastCoordinator(desk, { key, email, role });
  return onStore(() => storeMember(desk.store, { campaign: key, email, role, team }));
}

function refuseTeam(role: Membership["role"], team: string | null, teams: string[]): void {
  const listed = teams.length === 0 ? "none yet: add a team first" : teams.join(", ");
  if (team !== null && !teams.includes(team)) throw refused("/team", "unknown-key", team, listed);
  if (role === "reader" && team !== null) {
    throw refused("/team", "not-applicable", team, "no team for a reader");
  }
}

async function refuseLastCoordinator(
  desk: Desk,
  place: { key: string; email: string; role: Membership["role"] },
): Promise<void> {
  if (place.role === "coordinator") return;
  const members = await listMembers(desk.store, place.key);
  const coordinators = members.filter(({ role }) => role === "coordinator");
  const [only] = coordinators;
  if (coordinators.length === 1 && only?.email?.toLowerCase() === place.email.toLowerCase()) {
    throw refused("/role", "contradiction", place.role, "coordinator: a campaign keeps one");
  }
}

function refused(pointer: string, code: ProblemCode, found: string, allowed: string): DeskError {
  return invalid([{ pointer, code, found, allowed }]);
}
