import { blockEvidence } from "../block/evidence";
import { countedRate, countsOf, lnCounts } from "../combination/counts";
import { blockKey } from "../evidence-key";
import type { Roles, Workspace } from "../workspace";
import type { GeneralEvidence, Part } from "./block-parts";
import { buildBlock } from "./block-problem";
import { componentsOf } from "./components";
import { refuse } from "./refusals";

/**
 * ln Z of a block of measurands of any form: its measurements are parted into components that share
 * no unknown, and each is put together for the kernel.
 */
export function generalEvidence(
  workspace: Workspace,
  block: readonly number[],
  roles: Roles,
): GeneralEvidence {
  const key = blockKey(block, roles);
  const there = workspace.general.get(key);
  if (there !== undefined) return there;
  const made = ofRate(workspace, block, roles) ?? ofComponents(workspace, block, roles);
  workspace.general.set(key, made);
  return made;
}

export function partsOf({ frame }: Workspace, block: readonly number[], roles: Roles): Part[] {
  return block.map((measurand) => ({
    measurand,
    role: frame.measurands[measurand]!.roles[roles[measurand]!]!,
    reference: roles[measurand] === 0,
  }));
}

/** Counts whose rate hangs on nothing else. */
function ofRate(
  workspace: Workspace,
  block: readonly number[],
  roles: Roles,
): GeneralEvidence | null {
  const [{ measurand, role } = { measurand: -1, role: null }] = partsOf(workspace, block, roles);
  if (role?.kind !== "rate") return null;
  const counts = countsOf(workspace.sums.measurands[measurand]!.kept);
  const ln =
    role.family === "exact"
      ? lnCounts(counts, role.rate)
      : (countedRate(role, counts)?.lnEvidence ?? -Infinity);
  return { ln, error: 0, scored: [] };
}

function ofComponents(
  workspace: Workspace,
  block: readonly number[],
  roles: Roles,
): GeneralEvidence {
  const { components, ln } = componentsOf(workspace, partsOf(workspace, block, roles));
  const result: GeneralEvidence = { ln, error: 0, scored: [] };
  let squaredError = 0;
  for (const component of components) {
    const built = buildBlock(workspace, component);
    const outcome = blockEvidence(built.problem);
    if (!outcome.ok) return refuse(workspace, { ...built, refusal: outcome.refusal });
    result.ln += outcome.ln;
    squaredError += outcome.error * outcome.error;
    result.scored.push({ built, evidence: outcome });
  }
  result.error = Math.sqrt(squaredError);
  return result;
}
