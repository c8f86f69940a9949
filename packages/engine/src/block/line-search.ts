import { minimiseScalar } from "@weighhouse/numerics/minimise-scalar";
import { solveNormal, type Eliminated } from "./elimination";
import type { BentRow } from "./layout";
import { residualsAtValues, sumOfSquares } from "./residuals";
import { rowSum } from "./row-sum";
import type { WhiteRows } from "./whitening";
import type { Workbench } from "./workbench";

/** With more rows than this the lines are too many; the tangents' own minimum is what there is. */
const MOST_ROWS = 24;
const MOST_PAIRED = 8;
/** A direction with another row held that moves its own by less than this is the other's. */
const PARALLEL = 1e-9;
const MOST_ROUNDS = 30;
/** A round that lowers the sum by less than this share is the last. */
const ENOUGH = 1e-13;

export interface LowestFit {
  values: Float64Array;
  chiSquare: number;
}

/**
 * Lowers the penalised sum of squares from a fit by going along lines, each one the direction that
 * moves a bent row's mu most cheaply. Along a line the sum is a parabola and the bent rows' squares,
 * smooth between the places at which one of them comes to a kink: each such piece is searched, so
 * that a line's other minima are found, and minima on kinks. With one direction in all that is the
 * global minimum.
 */
export function lowestAlongLines(
  bench: Workbench,
  { white, eliminated }: { white: WhiteRows; eliminated: Eliminated },
  from: Float64Array,
): LowestFit {
  let values = from;
  let chiSquare = sumOfSquares(residualsAtValues(bench, white, values));
  const { bent } = bench.layout;
  const own = new Set(bench.plan.singles);
  if (bent.length > MOST_ROWS || bent.some(({ row }) => !own.has(row))) {
    return { values, chiSquare };
  }
  const directions = directionsOf(bench, eliminated);
  for (let round = 0; round < MOST_ROUNDS; round += 1) {
    const before = chiSquare;
    for (const direction of directions) {
      const t = bestStep(bench, white, { values, direction });
      if (t === 0) continue;
      const next = values.map((value, p) => value + t * direction[p]!);
      const sum = sumOfSquares(residualsAtValues(bench, white, next));
      if (sum < chiSquare) [values, chiSquare] = [next, sum];
    }
    if (before - chiSquare <= ENOUGH * before) break;
  }
  return { values, chiSquare };
}

/** Each bent row's own direction, and each one's with another row held where it is, on a kink. */
function directionsOf(bench: Workbench, eliminated: Eliminated): Float64Array[] {
  const { start, position, source, problem, bent, size } = bench.layout;
  const own = bent.flatMap(({ row }) => {
    const direction = new Float64Array(size);
    for (let e = start[row]!; e < start[row + 1]!; e += 1) {
      const s = source[e]!;
      direction[position[e]!]! +=
        s >= 0 ? problem.design.value[s]! : bench.state.columns[-1 - s]![row]!;
    }
    if (direction.every((value) => value === 0)) return [];
    solveNormal(eliminated, direction);
    const moved = rowSum(bench, row, direction);
    if (!Number.isFinite(moved) || moved === 0) return [];
    return [{ row, direction: direction.map((value) => value / moved) }];
  });
  const lines = own.map(({ direction }) => direction);
  if (own.length > MOST_PAIRED) return lines;
  for (const held of own) {
    for (const other of own) {
      const along = rowSum(bench, held.row, other.direction);
      const left = other.direction.map((value, p) => value - along * held.direction[p]!);
      if (Math.abs(rowSum(bench, other.row, left)) > PARALLEL) lines.push(left);
    }
  }
  return lines;
}

/** The t at which the sum is least along values + t direction, flat unknowns within their bounds. */
function bestStep(
  bench: Workbench,
  white: WhiteRows,
  { values, direction }: { values: Float64Array; direction: Float64Array },
): number {
  const line = lineOf(bench, white, { values, direction });
  const [lower, upper] = rangeOf(bench, values, direction);
  const kinks = line.rows.flatMap(({ bent, mu, slope }) =>
    slope === 0 ? [] : bent.factor.breaks.map((at) => (at - mu) / slope),
  );
  const reach = line.rows.map(({ bent, mu, slope }) => (bent.factor.centre - mu) / slope);
  const places = [0, ...kinks, ...reach].filter(Number.isFinite);
  // Beyond all kinks and readings, as far again: there every square rises outwards.
  const span = Math.max(...places) - Math.min(...places) + line.scale;
  const ends = [
    Math.max(lower, Math.min(...places) - span),
    Math.min(upper, Math.max(...places) + span),
  ];
  const edges = [ends[0]!, ...kinks.filter((t) => t > ends[0]! && t < ends[1]!), ends[1]!];
  edges.sort((a, b) => a - b);
  let best = { t: 0, value: line.at(0) };
  const offer = (t: number, value: number) => {
    if (value < best.value) best = { t, value };
  };
  for (let e = 0; e < edges.length; e += 1) {
    offer(edges[e]!, line.at(edges[e]!));
    if (e === 0 || !(edges[e]! > edges[e - 1]!)) continue;
    const found = minimiseScalar(line.at, edges[e - 1]!, edges[e]!);
    offer(found.x, found.value);
  }
  return best.t;
}

interface Line {
  at(t: number): number;
  rows: { bent: BentRow; mu: number; slope: number }[];
  /** Over which the parabola rises by one. */
  scale: number;
}

function lineOf(
  bench: Workbench,
  white: WhiteRows,
  { values, direction }: { values: Float64Array; direction: Float64Array },
): Line {
  const { layout, plan, prior, evaluated } = bench;
  const isBent = new Set(layout.bent.map(({ row }) => row));
  let [constant, linear, square] = [0, 0, 0];
  const add = (rest: number, moved: number) => {
    constant += rest * rest;
    linear -= 2 * rest * moved;
    square += moved * moved;
  };
  for (let n = 0; n < white.count; n += 1) {
    if (n < plan.singles.length && isBent.has(plan.singles[n]!)) continue;
    let rest = white.right[n]!;
    let moved = 0;
    for (let e = white.start[n]!; e < white.start[n + 1]!; e += 1) {
      rest -= white.value[e]! * values[white.position[e]!]!;
      moved += white.value[e]! * direction[white.position[e]!]!;
    }
    add(rest, moved);
  }
  for (const { position, value } of prior.rows) {
    let rest = 0;
    let moved = 0;
    for (let e = 0; e < position.length; e += 1) {
      rest -= value[e]! * values[position[e]!]!;
      moved += value[e]! * direction[position[e]!]!;
    }
    add(rest, moved);
  }
  const rows = layout.bent.map((bent) => ({
    bent,
    mu: evaluated.base[bent.row]! + rowSum(bench, bent.row, values),
    slope: rowSum(bench, bent.row, direction),
  }));
  const at = (t: number) => {
    let sum = constant + t * (linear + t * square);
    for (const { bent, mu, slope } of rows) sum += bent.residual(mu + t * slope) ** 2;
    return sum;
  };
  return { at, rows, scale: square > 0 ? 1 / Math.sqrt(square) : 1 };
}

function rangeOf({ layout }: Workbench, values: Float64Array, direction: Float64Array) {
  let [lower, upper] = [-Infinity, Infinity];
  layout.bounds.forEach((bounds, f) => {
    const step = direction[layout.open + f]!;
    if (step === 0) return;
    const ends = [bounds.lower, bounds.upper].map(
      (bound) => (bound - values[layout.open + f]!) / step,
    );
    lower = Math.max(lower, Math.min(...ends));
    upper = Math.min(upper, Math.max(...ends));
  });
  return [Math.min(lower, 0), Math.max(upper, 0)] as const;
}
