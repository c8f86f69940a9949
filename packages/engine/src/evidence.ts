import type { LogIntegral } from "@weighhouse/numerics/box";
import { logDiagonal } from "@weighhouse/numerics/triangular-system";
import { blocksOf, couplingOf } from "./blocks";
import { blockKey } from "./evidence-key";
import { eventEvidence, reportsOf } from "./events";
import { logFlatLevels } from "./flat-levels";
import { marginalOf } from "./marginal";
import { generalEvidence } from "./model/general-evidence";
import { isPlain } from "./plain-blocks";
import { solve } from "./solve";
import { levelOf, measuredIn, type Roles, type Workspace } from "./workspace";

const LN_2PI = 1.8378770664093453;

/**
 * ln Z = ln of the integral of the likelihood over everything unknown (section 3), over the
 * measurements of the measurands that have a role.
 *
 * Blocks that share no unknown are scored apart. Where a block has nothing but levels, shared
 * errors and normal noise, all Gaussian unknowns are integrated in closed form,
 *
 *   Z = N(y; f, D + WW') = (2 pi)^(-N/2) |D|^(-1/2) |R|^(-1) exp(-chi2 / 2)
 *
 * R the Cholesky factor of Woodbury's small matrix I + W' D^-1 W, chi2 the penalised minimum; then
 * the flat levels over their bounds. Any other block is put together row by row for the kernel.
 *
 * @returns ln Z, 0 for no measurements; the error is 0 for closed forms
 * @throws {EngineError} `refused`: what the kernel can't integrate, by name
 * Accuracy: closed forms 1e-9 relative; flat levels as `logFlatLevels` says.
 */
export function evidence(workspace: Workspace, roles: Roles): LogIntegral {
  let ln = 0;
  let squaredError = 0;
  for (const block of measuredBlocks(workspace, roles)) {
    const one = blockEvidence(workspace, block, roles);
    ln += one.ln;
    squaredError += one.error * one.error;
  }
  return { ln, error: Math.sqrt(squaredError) };
}

/** The measurands that count, in blocks. */
export function measuredBlocks(workspace: Workspace, roles: Roles): number[][] {
  return blocksOf(measuredIn(workspace, roles), couplingOf(workspace, roles));
}

function blockEvidence(workspace: Workspace, block: number[], roles: Roles): LogIntegral {
  const key = blockKey(block, roles);
  const there = workspace.evidences.get(key);
  if (there !== undefined) return there;
  const result = isPlain(workspace, block, roles)
    ? plainEvidence(workspace, block, roles)
    : (ofEvent(workspace, block, roles) ?? generalEvidence(workspace, block, roles));
  workspace.evidences.set(key, { ln: result.ln, error: result.error });
  return result;
}

function ofEvent(workspace: Workspace, [measurand]: number[], roles: Roles): LogIntegral | null {
  const role = workspace.frame.measurands[measurand!]!.roles[roles[measurand!]!]!;
  if (role.kind !== "event") return null;
  return { ln: eventEvidence(reportsOf(workspace, measurand!), role.probability), error: 0 };
}

function plainEvidence(workspace: Workspace, block: number[], roles: Roles): LogIntegral {
  const { sums, marginals } = workspace;
  const levels = block.map((m) => levelOf(workspace, m, roles[m]!));
  const parts = block.map((m, i) => ({ measurand: m, noise: levels[i]!.role.noise }));
  const marginal = marginalOf(marginals, parts);
  const solved = solve(marginal, levels);
  let counted = 0;
  for (const m of block) counted += sums.measurands[m]!.counted;
  const flat = logFlatLevels(workspace, { parts, levels, marginal, solved });
  const ln =
    marginal.logNorm -
    (counted * LN_2PI + marginal.squares + solved.system.rss) / 2 -
    logDiagonal(solved.system, 0, solved.gaussians) +
    flat.ln;
  return { ln, error: flat.error };
}
