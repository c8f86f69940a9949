import { chiSquareUpperTail } from "@weighhouse/numerics/chi-square";
import { lastUnknown } from "../chi-square-fit";
import { asymmetricRows } from "./asymmetric-rows";
import { mostLikely } from "./greatest-likelihood";
import { countedRate, countsOf } from "./counts";
import { cyclicLeastSquares, onCircle } from "./cyclic";
import { normalCombination, spreadCombination, type Combination } from "./combination";
import { generalisedLeastSquares, type GlsFit } from "./least-squares";
import { perMeasurand } from "./memo";
import { spreadOf } from "./spread";
import { mostLikelyTied } from "./tied";
import { levelRows } from "./level-rows";
import { meanOf, sdOf } from "../distribution/distribution";
import { marginalOf } from "../marginal";
import { solve } from "../solve";
import type { Workspace } from "../workspace";

/**
 * A measurand's measurements taken together, without any hypothesis (section 6).
 *
 * Ordinary values by generalised least squares with shared errors and scatter; with asymmetric ones
 * among them the maximum of the likelihood; with limits or linear noise a density; counts the
 * density of their rate.
 *
 * @returns null without counted measurements, on curves and events, and where the measurements
 *   leave no value possible
 * Accuracy: 1e-9 relative. Source: GUM (JCGM 100:2008); Birge, Phys. Rev. 40 (1932) 207.
 */
export const combineMeasured = perMeasurand(combineAnew);

function combineAnew(workspace: Workspace, measurand: number): Combination | null {
  const { curve, scale } = workspace.frame.measurands[measurand]!;
  const { counted, patterns, kept } = workspace.sums.measurands[measurand]!;
  if (counted === 0 || curve || scale === "event") return null;
  if (scale === "count") return combineCounts(workspace, measurand);
  const relative = patterns.some((one) => workspace.sums.patterns[one]!.relative.includes(true));
  if (kept.length === 0 && !relative) return plainLeastSquares(workspace, measurand);
  const forms = new Set(kept.map(({ told }) => told.form));
  const valued = patterns.length > 0 || forms.has("value") || forms.has("asymmetric");
  const factors = forms.has("censored") || forms.has("linear-noise") || forms.has("fainter");
  if (!valued || factors) {
    const density = spreadOf(workspace, measurand, { flat: valued });
    if (density === null) return null;
    return spreadCombination({ value: density.mean, sd: density.sd }, density, !valued);
  }
  const fit = iterated(workspace, measurand, (level) =>
    forms.has("asymmetric")
      ? greatestLikelihood(workspace, measurand, level)
      : leastSquares(workspace, measurand, level),
  );
  return fit === null ? null : normalCombination(fit, agreement(fit.chiSquare, counted));
}

function agreement(least: number, counted: number) {
  const degreesOfFreedom = counted - 1;
  // One measurement agrees with itself, whatever rounding says.
  const chiSquare = degreesOfFreedom === 0 ? 0 : Number.isNaN(least) ? Infinity : least;
  const pValue = degreesOfFreedom > 0 ? chiSquareUpperTail(chiSquare, degreesOfFreedom) : null;
  return { chiSquare, degreesOfFreedom, pValue };
}

/** From the sums alone: nothing there hangs on the level. */
function plainLeastSquares({ sums, marginals }: Workspace, measurand: number): Combination {
  const { counted, centre } = sums.measurands[measurand]!;
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
  const fit = { value: centre + value, sd: 1 / Math.abs(scale) };
  return normalCombination(fit, agreement(marginal.squares + system.rss, counted));
}

function combineCounts({ frame, sums }: Workspace, measurand: number): Combination | null {
  const reference = frame.measurands[measurand]!.roles[0]!;
  if (reference.kind !== "rate" || reference.family === "exact") return null;
  const readings = countsOf(sums.measurands[measurand]!.kept);
  const density = countedRate(reference, readings)?.distribution ?? null;
  if (density === null) return null;
  return spreadCombination({ value: meanOf(density), sd: sdOf(density) }, density, false);
}

type Fitted = Pick<GlsFit, "value" | "sd" | "chiSquare">;

/** Relative shared errors are scaled by the combined value: again and again until it stays. */
function iterated(
  workspace: Workspace,
  measurand: number,
  fitAt: (level: number) => Fitted | null,
): Fitted | null {
  const { rows } = levelRows(workspace, measurand, 0);
  let level = 0;
  for (const { y } of rows) level += y / rows.length;
  let fit = fitAt(level);
  for (let step = 0; step < MOST_STEPS && fit !== null; step += 1) {
    if (Math.abs(fit.value - level) <= STEADY * fit.sd) return fit;
    level = fit.value;
    fit = fitAt(level);
  }
  return fit;
}

const MOST_STEPS = 200;
const STEADY = 1e-13;

function leastSquares(workspace: Workspace, measurand: number, level: number): Fitted | null {
  const { rows, groups, squares } = levelRows(workspace, measurand, level);
  const { period } = workspace.frame.measurands[measurand]!;
  const fit =
    period > 0 ? cyclicLeastSquares(rows, groups, period) : generalisedLeastSquares(rows, groups);
  return fit === null ? null : { ...fit, chiSquare: fit.chiSquare + squares };
}

/** With asymmetric values among them. */
function greatestLikelihood(workspace: Workspace, measurand: number, level: number): Fitted | null {
  const frame = workspace.frame.measurands[measurand]!;
  const { period } = frame;
  const at = levelRows(workspace, measurand, level);
  const { rows, groups, squares } = at;
  const tied =
    groups.length > 0 || rows.some(({ loads }) => loads.some(({ value }) => value !== 0));
  const fit = tied ? mostLikelyTied(at, frame) : mostLikely(asymmetricRows(at, frame));
  if (fit === null) return null;
  const value = period > 0 ? onCircle(fit.value, period) : fit.value;
  return { value, sd: fit.sd, chiSquare: fit.chiSquare + squares };
}
