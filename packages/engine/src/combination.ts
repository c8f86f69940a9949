import { fitOf, lastUnknown } from "./chi-square-fit";
import { marginalOf } from "./marginal";
import { solve } from "./solve";
import type { Combination, Workspace } from "./workspace";

/**
 * Generalised least squares with shared errors and scatter, no hypothesis (section 6).
 *
 * @returns null without counted measurements
 * Accuracy: 1e-9 relative. Source: GUM (JCGM 100:2008); Birge, Phys. Rev. 40 (1932) 207.
 */
export function combine(workspace: Workspace, measurand: number): Combination | null {
  const there = workspace.combinations.get(measurand);
  if (there !== undefined) return there;
  const combination = leastSquares(workspace, measurand);
  workspace.combinations.set(measurand, combination);
  return combination;
}

function leastSquares({ sums, marginals }: Workspace, measurand: number): Combination | null {
  const { counted, centre } = sums.measurands[measurand]!;
  if (counted === 0) return null;
  const marginal = marginalOf(marginals, [{ measurand, noise: 0 }]);
  const open = {
    kind: "uniform",
    lower: -Infinity,
    upper: Infinity,
    width: Infinity,
    noise: 0,
  } as const;
  const { system } = solve(marginal, [{ role: open, centre }]);
  const { scale, value } = lastUnknown(system);
  const degreesOfFreedom = counted - 1;
  // One measurement agrees with itself, whatever rounding says.
  const least = degreesOfFreedom > 0 ? marginal.squares + system.rss : 0;
  const { chiSquare, pValue } = fitOf(least, degreesOfFreedom);
  return {
    value: centre + value,
    sd: 1 / Math.abs(scale),
    chiSquare,
    degreesOfFreedom,
    birgeRatio: degreesOfFreedom > 0 ? Math.sqrt(chiSquare / degreesOfFreedom) : null,
    pValue,
  };
}
