import type { Box, LogIntegral } from "@weighhouse/numerics/box";
import { logBoxIntegral, logCoupledBoxIntegral } from "@weighhouse/numerics/box-integral";
import { LN_SQRT_2PI, normalCdf } from "@weighhouse/numerics/normal";
import {
  addRow,
  createSystem,
  logDiagonal,
  type TriangularSystem,
} from "@weighhouse/numerics/triangular-system";
import { marginalOf } from "./marginal";
import type { Marginal, Part } from "./marginal-form";
import { boundsOf, solve, type Level, type Solved } from "./solve";
import type { Workspace } from "./workspace";

/** Bounds may be let go where all of them together cut off less than this share of the integral. */
const NEGLIGIBLE_SHARE = 1e-13;
const LEAST_SHARE = 1e-280;

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
  const integral =
    system.size === 1
      ? logBoxIntegral(system, boxOf(bounds))
      : integrate(workspace, { ...block, bounds, system });
  return { ln: integral.ln - logVolume, error: integral.error };
}

type Bounds = ReturnType<typeof boundsOf>;

export function boxOf(bounds: readonly Bounds[]): Required<Box> {
  return {
    lower: Float64Array.from(bounds, ({ lower }) => lower),
    upper: Float64Array.from(bounds, ({ upper }) => upper),
    width: Float64Array.from(bounds, ({ width }) => width),
  };
}

/** The system of the unknowns from `begin` on, those before integrated out. */
export function lastUnknowns(system: TriangularSystem, begin: number): TriangularSystem {
  const size = system.size - begin;
  const last = createSystem(size);
  for (let i = 0; i < size; i += 1) {
    const from = (begin + i) * (system.size + 1) + begin;
    last.data.set(system.data.subarray(from, from + size + 1), i * (size + 1));
  }
  return last;
}

/** Lets go of bounds as far as the answer allows, checked against the answer itself. */
function integrate(
  workspace: Workspace,
  block: Block & { bounds: Bounds[]; system: TriangularSystem },
): LogIntegral {
  const { bounds, system } = block;
  const cutOff = sharesOutside(system, bounds);
  const order = cutOff.map((_, i) => i).sort((a, b) => cutOff[a]! - cutOff[b]!);
  const whole = system.size * LN_SQRT_2PI - logDiagonal(system, 0, system.size);
  for (let share = 1; ;) {
    let free = 0;
    let lost = 0;
    const mayLose = NEGLIGIBLE_SHARE * share;
    for (const i of share > 0 ? order : []) {
      if (lost + cutOff[i]! > mayLose) break;
      lost += cutOff[i]!;
      free += 1;
    }
    const integral = integrateBounded(workspace, { ...block, order, free });
    const found = Math.exp(integral.ln - whole);
    // Below the smallest doubles the shares that are lost can't be told from nothing.
    const told = found > LEAST_SHARE;
    if (free === 0 || (told && lost <= NEGLIGIBLE_SHARE * found)) return integral;
    // The bounds that are kept leave less than was thought, so that more of the others count.
    share = told ? Math.min(found, share / 2) : 0;
  }
}

/** For each level, the probability outside its bounds if no level had any. */
function sharesOutside(system: TriangularSystem, bounds: readonly Bounds[]): number[] {
  const { size, data } = system;
  const width = size + 1;
  const mean = new Float64Array(size);
  const inverse = new Float64Array(size * size);
  for (let i = size - 1; i >= 0; i -= 1) {
    const diagonal = data[i * width + i]!;
    let rest = data[i * width + size]!;
    for (let k = i + 1; k < size; k += 1) rest -= data[i * width + k]! * mean[k]!;
    mean[i] = rest / diagonal;
    for (let j = i; j < size; j += 1) {
      let sum = i === j ? 1 : 0;
      for (let k = i + 1; k <= j; k += 1) sum -= data[i * width + k]! * inverse[k * size + j]!;
      inverse[i * size + j] = sum / diagonal;
    }
  }
  return bounds.map(({ lower, upper }, i) => {
    let variance = 0;
    for (let j = i; j < size; j += 1) variance += inverse[i * size + j]! ** 2;
    const sd = Math.sqrt(variance);
    return normalCdf((lower - mean[i]!) / sd) + normalCdf((mean[i]! - upper) / sd);
  });
}

/** The integral with the first `free` levels of `order` unbounded. */
function integrateBounded(
  workspace: Workspace,
  block: Block & { bounds: Bounds[]; system: TriangularSystem; order: number[]; free: number },
): LogIntegral {
  const { bounds, system, order, free } = block;
  const kept = order.length - free;
  const couplers = kept > 2 ? couplersOf(workspace, block.parts) : [];
  const few = kept > 3 ? 2 : 1;
  if (kept > 2 && couplers.length <= few) return coupled(workspace, block, couplers);
  const sorted = reordered(system, order);
  const scale = free * LN_SQRT_2PI - logDiagonal(sorted, 0, free);
  if (kept === 0) return { ln: scale, error: 0 };
  const box = boxOf(order.slice(free).map((i) => bounds[i]!));
  const integral = logBoxIntegral(lastUnknowns(sorted, free), box);
  return { ln: scale + integral.ln, error: integral.error };
}

function reordered(system: TriangularSystem, order: readonly number[]): TriangularSystem {
  const { size, data } = system;
  const sorted = createSystem(size);
  for (let i = 0; i < size; i += 1) {
    const row = new Float64Array(size + 1);
    order.forEach((from, to) => (row[to] = data[i * (size + 1) + from]!));
    row[size] = data[i * (size + 1) + size]!;
    addRow(sorted, row);
  }
  return sorted;
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
    bounds: Bounds[];
    order: number[];
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
