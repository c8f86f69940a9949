import type { Combination } from "./combination/combination";
import { combineMeasured } from "./combination/measured";
import { derivedValue } from "./derived/derived";
import type { Workspace } from "./workspace";

/**
 * A measurand's measurements taken together, or a derived value from its inputs' (section 6).
 *
 * @returns null where there is none
 */
export function combine(workspace: Workspace, measurand: number): Combination | null {
  return workspace.frame.measurands[measurand]!.derived === null
    ? combineMeasured(workspace, measurand)
    : (derivedValue(workspace, measurand)?.combination ?? null);
}
