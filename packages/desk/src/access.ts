import { KEY_PATTERN } from "@weighhouse/campaign/fields";
import { findCampaign } from "@weighhouse/store/campaigns";
import type { CampaignRow, Visibility } from "@weighhouse/store/campaigns";
import { findMembership } from "@weighhouse/store/members";
import type { Membership } from "@weighhouse/store/members";
import { StoreError } from "@weighhouse/store/store-error";
import type { Actor, ApiKeyUse, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { may, permission } from "./roles";
import type { Action, Role } from "./roles";
import { scopesFor } from "./scopes";

/** An actor's place in one campaign. */
export type Access = {
  campaign: CampaignRow;
  actor: Actor;
  role: Role;
  team: string | null;
  /** The opaque id that stands in entries; null for those without a membership. */
  member: string | null;
};

/**
 * The actor's place in a campaign, once the table allows the action there.
 *
 * @param of the team that the thing acted on belongs to, for actions allowed on one's own team's
 * @throws {DeskError} `not-found` also for a campaign that the actor may not even read: whether it
 *   exists is its members' business
 */
export async function enter(
  desk: Desk,
  actor: Actor,
  campaignKey: string,
  action: Action,
): Promise<Access> {
  const campaign = await campaignOf(desk, campaignKey);
  const place =
    actor && (await findMembership(desk.store, { campaign: campaignKey, userId: actor.userId }));
  const role = roleOf(actor, campaign.visibility, place);
  if (permission(role, "read-campaign") === "no") throw noSuchCampaign(campaignKey);
  if (permission(role, action) === "no") throw notAllowed(actor, role, action);
  requireScope(actor, campaignKey, action);
  return { campaign, actor, role, team: place?.team ?? null, member: place?.member ?? null };
}

/** Refuses what a key's scopes don't open, and everything outside the campaign that it is of. */
function requireScope(actor: Actor, campaign: string, action: Action): void {
  const key = actor?.through;
  if (key === undefined) return;
  const scopes = key.campaign === campaign ? key.scopes : [];
  if (!scopesFor(action).some((scope) => scopes.includes(scope))) throw beyondScopes(key, action);
}

/** Refuses what the table allows only on one's own team's things, where `of` is another team. */
export function requireOwnTeam(access: Access, action: Action, of: string | null): void {
  if (may(access.role, action, { own: access.team, of })) return;
  const named = (team: string | null) => (team === null ? "no team" : `the team ${team}`);
  const allowed =
    access.role === "member" && access.team === null
      ? "to members of a team"
      : `for ${named(access.team)}`;
  throw new DeskError("not-allowed", `found ${action} for ${named(of)}; allowed ${allowed}`);
}

/** Refuses who is in no team, where a team's word is asked for. */
export function requireTeam(access: Access, action: Action): string {
  if (access.team !== null) return access.team;
  throw new DeskError("not-allowed", `found ${action} for no team; allowed to members of a team`);
}

/** The actor, where an account is needed and no campaign is concerned yet. */
export function requireAccount(actor: Actor, action: Action): NonNullable<Actor> {
  if (actor?.through) throw beyondScopes(actor.through, action);
  if (actor && permission("account", action) === "yes") return actor;
  throw notAllowed(actor, actor ? "account" : "visitor", action);
}

export function roleOf(actor: Actor, visibility: Visibility, place: Membership | null): Role {
  if (place) return place.role;
  if (visibility === "public") return "reader";
  return actor ? "account" : "visitor";
}

/** In the same words as for one that is hidden, or the words would tell the two apart. */
async function campaignOf(desk: Desk, key: string): Promise<CampaignRow> {
  // The database takes no text with U+0000, so what can't be a key is not even asked for.
  if (!KEY_PATTERN.test(key)) throw noSuchCampaign(JSON.stringify(key));
  try {
    return await findCampaign(desk.store, key);
  } catch (error) {
    if (error instanceof StoreError && error.code === "no-such-campaign") throw noSuchCampaign(key);
    throw error;
  }
}

function noSuchCampaign(key: string): DeskError {
  return new DeskError("not-found", `found no campaign ${key}; allowed are those in the list`);
}

function notAllowed(actor: Actor, role: Role, action: Action): DeskError {
  if (!actor) return new DeskError("not-signed-in", `${action}: sign in first`);
  return new DeskError(
    "not-allowed",
    `found ${action} by a ${role}; the campaign's rules allow it to others`,
  );
}

function beyondScopes({ campaign, scopes }: ApiKeyUse, action: Action): DeskError {
  const found = `a key of ${campaign} with the scopes ${scopes.join(", ") || "(none)"}`;
  const opening = scopesFor(action).join(" or ");
  const allowed = opening === "" ? "signed in, without a key" : `with the scope ${opening}`;
  return new DeskError("insufficient-scope", `found ${action} by ${found}; allowed ${allowed}`);
}
