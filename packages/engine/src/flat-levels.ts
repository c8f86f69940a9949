import type { LogIntegral } from "@weighhouse/numerics/box";
import { logCoupledBoxIntegral } from "@weighhouse/numerics/box-integral";
import { LN_SQRT_2PI } from "@weighhouse/numerics/normal";
import { logDiagonal } from "@weighhouse/numerics/triangular-system";
import { boxOf, lastUnknowns, lnOverBox, type Bounds, type Coupled } from "./block/over-box";
import { marginalOf } from "./marginal";
import type { Marginal, Part } from "./marginal-form";
import { boundsOf, solve, type Level, type Solved } from "./solve";
import type { Workspace } from "./workspace";

interface Block {
  parts: readonly Part[];
  levels: readonly Level[];
  marginal: Marginal;
  solved: Solved;
}

/**
 * The flat levels' part of a block's ln Z: a Gaussian over a box, divided by the box's volume,
 *
 *   ln int exp(-|R t - z|^2 / 2) dt - sum ln(upper - lower)
 *
 * One level is closed-form. Of more, those whose bounds cut off nothing that counts are integrated
 * over the whole line, in closed form; two or three that are left by nested quadrature; more by
 * quadrature over the draws that couple them where those are one or two, else on a lattice.
 *
 * Accuracy: 1e-9 in ln; on the lattice within three stated errors.
 */
export function logFlatLevels(workspace: Workspace, block: Block): LogIntegral {
  const { solved, levels } = block;
  if (solved.flats.length === 0) return { ln: 0, error: 0 };
  const bounds = solved.flats.map((part) => boundsOf(levels[part]!));
  let logVolume = 0;
  for (const { width } of bounds) logVolume += Math.log(width);
  const system = lastUnknowns(solved.system, solved.gaussians);
  const byDraws: Coupled = (order, free) => {
    const kept = order.length - free;
    const couplers = kept > 2 ? couplersOf(workspace, block.parts) : [];
    const few = kept > 3 ? 2 : 1;
    if (kept <= 2 || couplers.length > few) return null;
    return coupled(workspace, { ...block, bounds, order, free }, couplers);
  };
  const integral = lnOverBox(system, bounds, byDraws);
  return { ln: integral.ln - logVolume, error: integral.error };
}

/** The draws that more than one measurand of the block loads. */
function couplersOf({ coupling }: Workspace, parts: readonly Part[]): number[] {
  const inside = new Set(parts.map(({ measurand }) => measurand));
  const couplers: number[] = [];
  for (const [draw, measurands] of coupling) {
    if (measurands.filter((m) => inside.has(m)).length > 1) couplers.push(draw);
  }
  return couplers.sort((a, b) => a - b);
}

/**
 * The block once more with its couplers as the last unknowns. What that integral holds of the
 * other Gaussian unknowns and of the batches is set off against the block as it was.
 */
function coupled(
  { marginals }: Workspace,
  {
    parts,
    levels,
    marginal,
    solved,
    bounds,
    order,
    free,
  }: Block & {
    bounds: Bounds;
    order: readonly number[];
    free: number;
  },
  couplers: number[],
): LogIntegral {
  const open = marginalOf(marginals, parts, new Set(couplers));
  const again = solve(open, levels, { couplers });
  const box = boxOf(bounds);
  for (const i of order.slice(0, free)) {
    box.lower[i] = -Infinity;
    box.upper[i] = Infinity;
    box.width[i] = Infinity;
  }
  const last = lastUnknowns(again.system, again.gaussians);
  const integral = logCoupledBoxIntegral(last, box);
  const norm = (one: Marginal, { system, gaussians }: Solved) =>
    one.logNorm - (one.squares + system.rss) / 2 - logDiagonal(system, 0, gaussians);
  const prior = couplers.length * LN_SQRT_2PI;
  const ln = integral.ln - prior + norm(open, again) - norm(marginal, solved);
  return { ln, error: integral.error };
}
