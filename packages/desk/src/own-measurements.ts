import { postersOf } from "@weighhouse/store/posted-by";
import { requireOwnTeam } from "./access";
import type { Access } from "./access";
import type { Desk } from "./desk";
import { DeskError } from "./desk-error";
import type { Action } from "./roles";

/** A measurement, and the team that it stands under. */
export type Owned = { id: string; team: string | null };

/**
 * Refuses what is another's: a coordinator may do it to every measurement, a team's member to the
 * team's, and an observer, a member of no team, to those that they posted themselves for no team.
 */
export async function requireOwnMeasurements(
  desk: Desk,
  access: Access,
  { action, measurements }: { action: Action; measurements: readonly Owned[] },
): Promise<void> {
  if (!isObserver(access)) {
    for (const { team } of measurements) requireOwnTeam(access, action, team);
    return;
  }
  const ids = measurements.map(({ id }) => id);
  const posters = await postersOf(desk.store, access.campaign.key, ids);
  const strange = measurements.find(
    ({ id, team }) => team !== null || posters.get(id) !== access.member,
  );
  if (strange === undefined) return;
  throw new DeskError(
    "not-allowed",
    `found ${action} of ${strange.id}; allowed to an observer for what they posted themselves`,
  );
}

/** Refuses a team that the actor doesn't speak for, where a measurement is put under it. */
export function requireTeamFor(access: Access, action: Action, team: string | null): void {
  if (team === null && isObserver(access)) return;
  requireOwnTeam(access, action, team);
}

function isObserver({ role, team }: Access): boolean {
  return role === "member" && team === null;
}
