import { logPoissonPmf } from "@weighhouse/numerics/poisson-distribution";
import type { Told } from "../readings";
import type { Workspace } from "../workspace";
import type { Assembly } from "./assembly";
import type { Part } from "./block-parts";
import { addOuterParameters } from "./expected-values";

type Count = Extract<Told, { form: "count" }>;

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
    const counts = countsOf(workspace, measurand);
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

/** A measurand's counts. */
export function countsOf({ sums }: Workspace, measurand: number): Count[] {
  return sums.measurands[measurand]!.kept.flatMap(({ told }) =>
    told.form === "count" ? [told] : [],
  );
}

export function lnCounts(counts: readonly Count[], rate: number): number {
  if (!(rate >= 0 && rate < Infinity)) return -Infinity;
  let ln = 0;
  for (const { count, exposure, background } of counts) {
    const mean = exposure * rate + background;
    ln += mean < Infinity ? logPoissonPmf(count, mean) : -Infinity;
  }
  return ln;
}
