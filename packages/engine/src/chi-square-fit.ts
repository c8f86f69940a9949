import { chiSquareUpperTail } from "@weighhouse/numerics/chi-square";
import { boundedLeastSquares } from "./block/bounded-least-squares";
import { boxOf, lastUnknowns } from "./block/over-box";
import { measuredBlocks } from "./evidence";
import { blockKey } from "./evidence-key";
import { marginalOf } from "./marginal";
import { generalFit } from "./model/general-fit";
import { isPlain } from "./plain-blocks";
import { boundsOf, solve } from "./solve";
import {
  levelOf,
  onlyMeasurand,
  type BlockChiSquare,
  type Roles,
  type Workspace,
} from "./workspace";

export interface Fit {
  chiSquare: number;
  degreesOfFreedom: number;
  /** Null without degrees of freedom. */
  pValue: number | null;
}

/** A minimum that lies at a bound costs no degree of freedom; at: within this share of the width. */
const AT_BOUND = 1e-6;

/**
 * The penalised minimum (section 5) over everything unknown, over the measurements with a value of
 * the measurands that have a role. With everything Gaussian it is r' (D + WW')^-1 r.
 *
 * @returns null with no such measurement
 * @throws {EngineError} `refused`
 */
export function fit(workspace: Workspace, roles: Roles): Fit | null {
  let chiSquare = 0;
  let counted = 0;
  let flatInside = 0;
  for (const block of measuredBlocks(workspace, roles)) {
    const one = blockFit(workspace, block, roles);
    chiSquare += one.chiSquare;
    counted += one.counted;
    flatInside += one.flatInside;
  }
  return counted === 0 ? null : fitOf(chiSquare, counted - flatInside);
}

/** How well a measurand's reference describes its own measurements; null without any. */
export function referenceFit(workspace: Workspace, measurand: number): Fit | null {
  return fit(workspace, onlyMeasurand(workspace, measurand, 0));
}

/** @param least a minimum; one beyond all doubles is infinite, and its p 0 */
export function fitOf(least: number, degreesOfFreedom: number): Fit {
  const chiSquare = Number.isNaN(least) ? Infinity : least;
  const pValue = degreesOfFreedom > 0 ? chiSquareUpperTail(chiSquare, degreesOfFreedom) : null;
  return { chiSquare, degreesOfFreedom, pValue };
}

function blockFit(workspace: Workspace, block: number[], roles: Roles): BlockChiSquare {
  const key = blockKey(block, roles);
  const there = workspace.fits.get(key);
  if (there !== undefined) return there;
  const made = isPlain(workspace, block, roles)
    ? plainFit(workspace, block, roles)
    : generalFit(workspace, block, roles);
  workspace.fits.set(key, made);
  return made;
}

function plainFit(workspace: Workspace, block: number[], roles: Roles): BlockChiSquare {
  const levels = block.map((m) => levelOf(workspace, m, roles[m]!));
  const parts = block.map((m, i) => ({ measurand: m, noise: levels[i]!.role.noise }));
  const marginal = marginalOf(workspace.marginals, parts);
  const { system, gaussians, flats } = solve(marginal, levels);
  let counted = 0;
  for (const m of block) counted += workspace.sums.measurands[m]!.counted;
  const fixed = marginal.squares + system.rss;
  if (flats.length === 0) return { chiSquare: fixed, counted, flatInside: 0 };
  const bounds = flats.map((part) => boundsOf(levels[part]!));
  const best = boundedLeastSquares(lastUnknowns(system, gaussians), boxOf(bounds));
  let flatInside = 0;
  bounds.forEach(({ lower, upper, width }, i) => {
    const margin = AT_BOUND * width;
    const value = best.values[i]!;
    if (value - lower > margin && upper - value > margin) flatInside += 1;
  });
  return { chiSquare: fixed + best.chiSquare, counted, flatInside };
}

/** The last unknown's best value, and what one of its unit costs in standard deviations. */
export function lastUnknown({ size, data }: { size: number; data: Float64Array }) {
  const scale = data[size * (size + 1) - 2]!;
  return { scale, value: data[size * (size + 1) - 1]! / scale };
}
