import type { Problem } from "@weighhouse/campaign/problem";
import { choleskyFactor } from "@weighhouse/numerics/symmetric-cholesky";
import { integrandOf } from "../block/integrand";
import { layoutOf } from "../block/layout";
import { lnOrthant } from "../block/orthant";
import type { BlockProblem, BlockRefusal } from "../block/problem";
import { workbenchOf } from "../block/workbench";
import { EngineError } from "../engine-error";
import type { EngineState } from "../engine-state";
import { enteredRoles } from "../entered";
import { measuredBlocks } from "../evidence";
import { openWorkspace } from "../open-workspace";
import { isPlain } from "../plain-blocks";
import type { Roles, Workspace } from "../workspace";
import { buildBlock } from "./block-problem";
import { componentsOf } from "./components";
import { partsOf } from "./general-evidence";
import { refuse } from "./refusals";

const MOST_DIMENSIONS = 30;

/**
 * What keeps a campaign from being scored though each of its parts is right, found without
 * integrating anything: covariances that aren't positive definite, and more numerical unknowns
 * together than can be integrated. Every hypothesis is looked at with all that it says.
 */
export function unscorableParts(state: Pick<EngineState, "frame" | "sums">): Problem[] {
  if (isAllPlain(state)) return [];
  const problems = new Map<string, Problem>();
  const workspace = openWorkspace(state);
  const { frame } = workspace;
  const silent: Roles = frame.measurands.map(() => 0);
  const looked = new Set<string>();
  for (const said of [silent, ...frame.hypotheses.map((one) => saidBy(one, silent))]) {
    // A derived value that only has a verdict is never beside another.
    const roles = enteredRoles(workspace, said);
    for (const block of measuredBlocks(workspace, roles)) {
      const key = block.map((m) => `${m}:${roles[m]}`).join(" ");
      if (looked.has(key) || isPlain(workspace, block, roles)) continue;
      looked.add(key);
      for (const problem of problemsOf(workspace, block, roles)) {
        problems.set(`${problem.pointer} ${problem.found}`, problem);
      }
    }
  }
  return [...problems.values()];
}

/** Nothing that isn't scored from the sums alone: then there is nothing to look for. */
function isAllPlain({ frame, sums }: Pick<EngineState, "frame" | "sums">): boolean {
  return (
    frame.hypotheses.every(({ predictions }) =>
      predictions.every(
        ({ measurand, role }) => frame.measurands[measurand]!.roles[role]!.kind !== "predicted",
      ),
    ) &&
    sums.measurands.every(({ kept }) => kept.length === 0) &&
    sums.patterns.every(({ relative }) => !relative.includes(true))
  );
}

function saidBy({ predictions }: Workspace["frame"]["hypotheses"][number], silent: Roles): Roles {
  const roles = [...silent];
  for (const { measurand, role } of predictions) roles[measurand] = role;
  return roles;
}

function problemsOf(workspace: Workspace, block: readonly number[], roles: Roles): Problem[] {
  const parts = partsOf(workspace, block, roles);
  if (parts.some(({ role }) => role.kind === "event" || role.kind === "rate")) return [];
  const problems: Problem[] = [];
  for (const component of componentsOf(workspace, parts).components) {
    const built = buildBlock(workspace, component);
    const refusal = refusalOf(built.problem);
    if (refusal === null) continue;
    try {
      refuse(workspace, { ...built, refusal });
    } catch (error) {
      if (!(error instanceof EngineError)) throw error;
      problems.push(...error.problems);
    }
  }
  return problems;
}

function refusalOf(problem: BlockProblem): BlockRefusal | null {
  for (const { rows, covariance } of problem.rows.groups) {
    const factor = choleskyFactor(covariance, rows.length);
    if (!factor.ok) return { kind: "singular", rows: [...rows] };
  }
  const made = workbenchOf(layoutOf(problem, "evidence"));
  if (!made.ok) return made.refusal;
  const { bench } = made;
  const { outer, linear } = problem;
  // No more dimensions than unknowns, whatever the rows.
  if (outer.length + linear.length <= MOST_DIMENSIONS) return null;
  const integrand = integrandOf(bench, 0, { flatsOpen: bench.layout.others.length > 0 });
  const dimensions = integrand.coordinates.length;
  if (dimensions <= MOST_DIMENSIONS || lnOrthant(bench, integrand) !== null) return null;
  return { kind: "too-many-unknowns", dimensions, limit: MOST_DIMENSIONS };
}
