import { blockFit } from "../block/fit";
import { isValue } from "../readings";
import type { BlockChiSquare, Roles, Workspace } from "../workspace";
import { buildBlock } from "./block-problem";
import { componentsOf } from "./components";
import { partsOf } from "./general-evidence";
import { refuse } from "./refusals";

/**
 * A block's penalised minimum over the measurements with a value: limits, events and counts are
 * left out, and with them what only they hang on.
 */
export function generalFit(
  workspace: Workspace,
  block: readonly number[],
  roles: Roles,
): BlockChiSquare {
  const { frame } = workspace;
  const parts = partsOf(workspace, block, roles).filter(({ measurand }) => {
    const { scale } = frame.measurands[measurand]!;
    return scale !== "event" && scale !== "count";
  });
  const { components, squares, counted } = componentsOf(
    workspace,
    parts,
    ({ told }) => told === null || isValue(told),
  );
  const result: BlockChiSquare = { chiSquare: squares, counted, flatInside: 0 };
  for (const component of components) {
    const built = buildBlock(workspace, component);
    const outcome = blockFit(built.problem);
    if (outcome?.ok === false) return refuse(workspace, { ...built, refusal: outcome.refusal });
    // Where nothing that is expected has a value no minimum is finite.
    result.chiSquare += outcome?.chiSquare ?? Infinity;
    result.flatInside += outcome?.flatInside ?? 0;
    for (const { count } of component.rows) result.counted += count;
  }
  return result;
}
