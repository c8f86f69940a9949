import { countsOf, lnCounts } from "../combination/counts";
import type { Workspace } from "../workspace";
import type { Assembly } from "./assembly";
import type { Part } from "./block-parts";
import { addOuterParameters } from "./expected-values";

/**
 * ln of the probability of counts whose rate hangs on parameters or the ensemble,
 *
 *   sum over measurements of ln Poisson(n; exposure rate + background)
 *
 * @returns null where a block has none; the factor is -Infinity where a rate isn't finite and >= 0
 */
export function countFactor(
  workspace: Workspace,
  assembly: Assembly,
  { parts, linear }: { parts: readonly Part[]; linear: ReadonlySet<number> },
): ((outer: Float64Array, scenario: number) => number) | null {
  const terms = parts.flatMap(({ measurand, role }) => {
    if (role.kind !== "predicted" || role.prediction.expectation === null) return [];
    const { prediction } = role;
    const { evaluate, slots } = role.prediction.expectation;
    addOuterParameters(assembly, prediction, linear);
    const scope = assembly.scopeOf(prediction.hypothesis);
    const values = new Float64Array(slots.length);
    const counts = countsOf(workspace.sums.measurands[measurand]!.kept);
    return [
      () => {
        values.set(scope);
        return lnCounts(counts, evaluate(values));
      },
    ];
  });
  if (terms.length === 0) return null;
  return (outer, scenario) => {
    assembly.moveTo(outer, scenario);
    let ln = 0;
    for (const term of terms) ln += term();
    return ln;
  };
}
