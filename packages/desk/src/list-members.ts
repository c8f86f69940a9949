import * as z from "zod";
import { listMembers as listStored } from "@weighhouse/store/members";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import type { Role } from "./roles";

export const listMembersInput = z.strictObject({ key: z.string() });

export type ListedMember = {
  /** The opaque id that stands in entries. */
  member: string;
  name: string;
  /** For the coordinators' eyes only; null for other members. */
  email: string | null;
  role: Role;
  team: string | null;
};

/** Who has a place in the campaign. Readers see teams, not people. */
export async function listMembers(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof listMembersInput>,
): Promise<ListedMember[]> {
  const { key } = parseInput(listMembersInput, input);
  const access = await enter(desk, actor, key, "list-members");
  const members = await listStored(desk.store, key);
  return members.map(({ member, name, email, role, team }) => ({
    member,
    name,
    email: access.role === "coordinator" ? email : null,
    role,
    team,
  }));
}
