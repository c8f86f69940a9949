import type { Store } from "./open-store";
import { StoreError } from "./store-error";

export const roles = ["coordinator", "member", "reader"] as const;
export type Role = (typeof roles)[number];

export type Membership = {
  /** Opaque id, the one that stands in entries. */
  member: string;
  userId: string | null;
  name: string;
  email: string | null;
  role: Role;
  team: string | null;
};

/** The user's membership in a campaign, or null. */
export async function findMembership(
  _store: Store,
  _input: { campaign: string; userId: string },
): Promise<Membership | null> {
  return null;
}

export async function listMembers(_store: Store, _campaign: string): Promise<Membership[]> {
  return [];
}

/** Adds a registered user by e-mail; adding the same one again changes role and team. */
export async function addMember(
  _store: Store,
  _input: { campaign: string; email: string; role: Role; team: string | null },
): Promise<Membership> {
  throw new StoreError("no-such-member", "");
}
