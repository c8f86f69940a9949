import {
  addRow,
  createSystem,
  setUnitPrior,
  type TriangularSystem,
} from "@weighhouse/numerics/triangular-system";
import type { NormalRole, UniformRole } from "./frame";
import type { Marginal } from "./marginal-form";

/** A level as it is said to be; `centre` is what the sums are kept relative to. */
export type Level = { role: NormalRole | UniformRole; centre: number };

/** A flat level this many of its widths away from the data is told from its own bound. */
const FAR = 1e3;

/**
 * What the unknown of a flat level is counted from: the centre of the sums, or its lower bound
 * where the bounds are near to one another and far from the data, so that they stay two numbers.
 */
export function originOf({ role, centre }: Level): number {
  if (role.kind !== "uniform") return centre;
  const distance = Math.max(Math.abs(role.lower - centre), Math.abs(role.upper - centre));
  return distance > FAR * role.width ? role.lower : centre;
}

/** The bounds of a flat level's unknown. */
export function boundsOf(level: Level): { lower: number; upper: number; width: number } {
  const { role } = level;
  if (role.kind !== "uniform") throw new TypeError("only a flat level has bounds");
  const origin = originOf(level);
  const { lower, upper, width } = role;
  if (origin === lower) return { lower: 0, upper: width, width };
  return { lower: lower - origin, upper: upper - origin, width };
}

/**
 * A marginal with levels and draws under their priors: Gaussian unknowns first, then the flat
 * levels, then the couplers.
 */
export interface Solved {
  system: TriangularSystem;
  /** Number of Gaussian unknowns, whose priors are N(0, 1). */
  gaussians: number;
  /** Parts whose level is flat, in the order of their unknowns after the Gaussian ones. */
  flats: number[];
}

/**
 * Puts what is said of the levels into a marginal: a normal level is its mean plus sd times an
 * unknown of N(0, 1), one with sd 0 is known, a uniform one stays open (its bounds are for the
 * caller).
 *
 * @param levels one per part of the marginal
 * @param couplers draws that come last, and not among the Gaussian unknowns
 * @param flatOrder order of the flat parts; as they come if not given
 */
export function solve(
  { system: marginal, draws }: Marginal,
  levels: readonly Level[],
  { couplers = [], flatOrder }: { couplers?: readonly number[]; flatOrder?: number[] } = {},
): Solved {
  const parts = levels.map((_, part) => part);
  const free = parts.filter((part) => isFree(levels[part]!.role));
  const flats = flatOrder ?? parts.filter((part) => levels[part]!.role.kind === "uniform");
  const inner = draws.filter((draw) => !couplers.includes(draw));
  const gaussians = free.length + inner.length;

  const columns = new Int32Array(marginal.size).fill(-1);
  free.forEach((part, i) => (columns[part] = i));
  flats.forEach((part, i) => (columns[part] = gaussians + i));
  draws.forEach((draw, i) => {
    const coupler = couplers.indexOf(draw);
    const column =
      coupler < 0 ? free.length + inner.indexOf(draw) : gaussians + flats.length + coupler;
    columns[levels.length + i] = column;
  });

  const system = createSystem(gaussians + flats.length + couplers.length);
  system.rss = marginal.rss;
  for (let i = 0; i < gaussians; i += 1) setUnitPrior(system, i);
  for (let i = 0; i < couplers.length; i += 1) setUnitPrior(system, gaussians + flats.length + i);
  for (let i = 0; i < marginal.size; i += 1) {
    const row = levelRow(marginal, i, { levels, columns, size: system.size });
    if (row !== null) addRow(system, row);
  }
  return { system, gaussians, flats };
}

function isFree(role: Level["role"]): boolean {
  return role.kind === "normal" && role.sd > 0;
}

/** Row i of the marginal in the new unknowns; null where it says nothing. */
function levelRow(
  marginal: TriangularSystem,
  i: number,
  { levels, columns, size }: { levels: readonly Level[]; columns: Int32Array; size: number },
): Float64Array | null {
  const start = i * (marginal.size + 1);
  if (marginal.data[start + i] === 0) return null;
  const row = new Float64Array(size + 1);
  let known = marginal.data[start + marginal.size]!;
  for (let k = i; k < marginal.size; k += 1) {
    const coefficient = marginal.data[start + k]!;
    const level = levels[k];
    const column = columns[k]!;
    if (level?.role.kind === "normal") {
      known -= coefficient * (level.role.mean - level.centre);
      if (column >= 0) row[column] = coefficient * level.role.sd;
    } else {
      row[column] = coefficient;
      if (level !== undefined) known -= coefficient * (originOf(level) - level.centre);
    }
  }
  row[size] = known;
  return row;
}
