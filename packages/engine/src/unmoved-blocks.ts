import type { Frame, Role } from "./frame";
import type { Workspace } from "./workspace";

/**
 * Takes over what was worked out of a campaign before it changed, as far as the change doesn't touch
 * it: evidences and fits of blocks all of whose measurands have the same readings and mean the same by
 * their roles. Derived values hang on others' readings: theirs aren't taken over.
 *
 * Both have the same shared errors and correlations, and the same measurands in the same order.
 *
 * @param touched measurands whose readings differ
 */
export function takeUnmovedBlocks(
  workspace: Workspace,
  before: Workspace,
  touched: ReadonlySet<number>,
): void {
  const same = new Map<string, boolean>();
  const isSame = (part: string): boolean => {
    const there = same.get(part);
    if (there !== undefined) return there;
    const [measurand, role] = part.split(":").map(Number) as [number, number];
    const holds =
      !touched.has(measurand) &&
      workspace.frame.measurands[measurand]!.derived === null &&
      meansTheSame(workspace.frame, before.frame, { measurand, role });
    same.set(part, holds);
    return holds;
  };
  const unmoved = (key: string) => key.split(" ").every(isSame);
  for (const [key, value] of before.evidences) {
    if (unmoved(key)) workspace.evidences.set(key, value);
  }
  for (const [key, value] of before.fits) if (unmoved(key)) workspace.fits.set(key, value);
}

function meansTheSame(
  a: Frame,
  b: Frame,
  { measurand, role }: { measurand: number; role: number },
): boolean {
  if (a === b) return true;
  const [first, second] = [a, b].map((frame) => frame.measurands[measurand]!.roles[role]);
  if (first === undefined || second === undefined) return false;
  return meaningOf(a, measurand, first) === meaningOf(b, measurand, second);
}

/** Numbers and declarations that a role hangs on. */
function meaningOf(frame: Frame, measurand: number, role: Role): string {
  if (role.kind !== "predicted") {
    const noise = "noise" in role ? frame.measurands[measurand]!.noises[role.noise] : 0;
    return JSON.stringify([{ ...role, noise: 0 }, noise]);
  }
  const { prediction } = role;
  const { tolerance, natural, hypothesis } = prediction;
  return JSON.stringify([tolerance, natural, frame.document.hypotheses[hypothesis]]);
}
