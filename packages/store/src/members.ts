import { randomUUID } from "node:crypto";
import { and, asc, eq } from "drizzle-orm";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import { campaigns, memberships, user } from "./schema/tables";
import { StoreError } from "./store-error";

export const roles = ["coordinator", "member", "reader"] as const;
export type Role = (typeof roles)[number];

export type Membership = {
  /** Opaque id, the one that stands in entries. */
  member: string;
  /** Null, with name and e-mail, for a person who was forgotten. */
  userId: string | null;
  name: string;
  email: string | null;
  role: Role;
  team: string | null;
};

const FORGOTTEN = "(no longer known)";

const columns = {
  member: memberships.member,
  userId: memberships.userId,
  name: user.name,
  email: user.email,
  role: memberships.role,
  team: memberships.team,
};

/** The user's membership in a campaign, or null. */
export async function findMembership(
  store: Store,
  { campaign, userId }: { campaign: string; userId: string },
): Promise<Membership | null> {
  const [row] = await store.db
    .select(columns)
    .from(memberships)
    .innerJoin(campaigns, eq(campaigns.id, memberships.campaignId))
    .leftJoin(user, eq(user.id, memberships.userId))
    .where(and(eq(campaigns.key, campaign), eq(memberships.userId, userId)));
  return row === undefined ? null : named(row);
}

/** All members of a campaign in the order in which they were added. */
export async function listMembers(store: Store, campaign: string): Promise<Membership[]> {
  const rows = await store.db
    .select(columns)
    .from(memberships)
    .innerJoin(campaigns, eq(campaigns.id, memberships.campaignId))
    .leftJoin(user, eq(user.id, memberships.userId))
    .where(eq(campaigns.key, campaign))
    .orderBy(asc(memberships.addedAt), asc(memberships.member));
  return rows.map(named);
}

/**
 * Adds a registered user by e-mail; adding the same one again changes role and team, and leaves the
 * member's id.
 *
 * @throws {StoreError} `no-such-campaign`, `no-such-member` where nobody has that e-mail
 */
export async function addMember(
  store: Store,
  input: { campaign: string; email: string; role: Role; team: string | null },
): Promise<Membership> {
  const { id } = await findCampaign(store, input.campaign, store.db);
  const email = input.email.trim().toLowerCase();
  const [person] = await store.db.select().from(user).where(eq(user.email, email));
  if (person === undefined) {
    throw new StoreError(
      "no-such-member",
      `found no account with the e-mail ${JSON.stringify(email)}; allowed is that of someone who has signed up`,
    );
  }
  const { role, team } = input;
  await store.db
    .insert(memberships)
    .values({ campaignId: id, member: randomUUID(), userId: person.id, role, team })
    .onConflictDoUpdate({
      target: [memberships.campaignId, memberships.userId],
      set: { role, team },
    });
  return (await findMembership(store, { campaign: input.campaign, userId: person.id }))!;
}

function named(row: Omit<Membership, "name"> & { name: string | null }): Membership {
  return { ...row, name: row.name ?? FORGOTTEN };
}
