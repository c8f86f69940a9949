import type { Roles, Workspace } from "./workspace";

/**
 * How many measurements each measurand stands for in the evidence. A scored derived value that can
 * be computed is one in place of its inputs, which then are none; any other derived value is none.
 */
export function enteredCounts({ frame, sums, derived }: Workspace): number[] {
  const counts = sums.measurands.map(({ counted }) => counted);
  frame.measurands.forEach((one, m) => {
    if (one.derived === null) return;
    const enters = one.derived.scored && derived.measurands.includes(m);
    counts[m] = enters ? 1 : 0;
    if (enters) for (const { measurand } of one.derived.from) counts[measurand] = 0;
  });
  return counts;
}

/** Roles of what enters the evidence; null for the others. */
export function enteredRoles(workspace: Workspace, roles: Roles): Roles {
  const counts = enteredCounts(workspace);
  return roles.map((role, m) => (counts[m]! > 0 ? role : null));
}
