import { chiSquareUpperTail } from "@weighhouse/numerics/chi-square";
import { blocksOf } from "./blocks";
import { marginalOf } from "./marginal";
import type { Part } from "./marginal-form";
import { boundsOf, solve, type Level } from "./solve";
import { levelOf, measuredIn, onlyMeasurand, type Roles, type Workspace } from "./workspace";

export interface Fit {
  chiSquare: number;
  degreesOfFreedom: number;
  /** Null without degrees of freedom. */
  pValue: number | null;
}

/** A minimum that lies at a bound costs no degree of freedom; at: within this share of the width. */
const AT_BOUND = 1e-6;

/**
 * The penalised minimum (section 5) over normal levels and draws, which is r' (D + WW')^-1 r.
 *
 * @param roles of measurands with normal levels only
 * @returns null with nothing compared
 */
export function fit(workspace: Workspace, roles: Roles): Fit | null {
  const measured = measuredIn(workspace, roles);
  if (measured.length === 0) return null;
  let chiSquare = 0;
  let counted = 0;
  for (const block of blocksOf(measured, workspace.coupling)) {
    const { marginal, solved } = solveBlock(workspace, block, roles);
    chiSquare += marginal.squares + solved.system.rss;
    for (const m of block) counted += workspace.sums.measurands[m]!.counted;
  }
  return fitOf(chiSquare, counted);
}

/** How well a measurand's reference describes its own measurements; null without any. */
export function referenceFit(workspace: Workspace, measurand: number): Fit | null {
  const { counted } = workspace.sums.measurands[measurand]!;
  if (counted === 0) return null;
  const level = levelOf(workspace, measurand, 0);
  if (level.role.kind === "normal") return fit(workspace, onlyMeasurand(workspace, measurand, 0));
  const roles = onlyMeasurand(workspace, measurand, 0);
  const { marginal, solved } = solveBlock(workspace, [measurand], roles);
  const { lower, upper, width } = boundsOf(level);
  const { scale, value } = lastUnknown(solved.system);
  const best = Math.min(Math.max(value, lower), upper);
  const margin = AT_BOUND * width;
  const inside = best - lower > margin && upper - best > margin;
  const beyond = scale * (best - value);
  const chiSquare = marginal.squares + solved.system.rss + beyond * beyond;
  return fitOf(chiSquare, counted - (inside ? 1 : 0));
}

/** @param least a minimum; one beyond all doubles is infinite, and its p 0 */
export function fitOf(least: number, degreesOfFreedom: number): Fit {
  const chiSquare = Number.isNaN(least) ? Infinity : least;
  const pValue = degreesOfFreedom > 0 ? chiSquareUpperTail(chiSquare, degreesOfFreedom) : null;
  return { chiSquare, degreesOfFreedom, pValue };
}

function solveBlock(workspace: Workspace, block: number[], roles: Roles) {
  const levels: Level[] = block.map((m) => levelOf(workspace, m, roles[m]!));
  const parts: Part[] = block.map((m, i) => ({ measurand: m, noise: levels[i]!.role.noise }));
  const marginal = marginalOf(workspace.marginals, parts);
  return { marginal, solved: solve(marginal, levels) };
}

/** The last unknown's best value, and what one of its unit costs in standard deviations. */
export function lastUnknown({ size, data }: { size: number; data: Float64Array }) {
  const scale = data[size * (size + 1) - 2]!;
  return { scale, value: data[size * (size + 1) - 1]! / scale };
}
