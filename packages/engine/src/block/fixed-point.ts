import { asymmetricVariance } from "./asymmetric";
import { boundedLeastSquares } from "./bounded-least-squares";
import { backSubstitute, eliminate, type Eliminated } from "./elimination";
import type { Layout } from "./layout";
import { ASYMMETRIC } from "./problem";
import { addProcessValues } from "./process-values";
import { whitenRows, type WhiteRows } from "./whitening";
import type { Workbench } from "./workbench";

/** Variances and loadings have settled when none moves by more than this share. */
const SETTLED = 1e-12;
const MOST_ROUNDS = 300;
/** After so many rounds each step is halved: what swings then comes to rest. */
const PATIENCE = 40;
/** A slope of less than this, in the row's own scale, is none. */
const FLAT = 1e-9;

export interface Settled {
  eliminated: Eliminated;
  white: WhiteRows;
}

/**
 * Whitens and eliminates; where variances or loadings hang on the penalised best fit, again and
 * again until they are those at the fit that they themselves give. They start at the readings.
 */
export function settle(bench: Workbench): Settled | { singular: number[] } {
  const { layout, plan, prior, state } = bench;
  const moves = layout.moving || layout.bent.length > 0 || layout.problem.atFit.length > 0;
  bench.tangents.fill(NaN);
  if (moves) startAtReadings(bench);
  for (let round = 0; ; round += 1) {
    const white = whitenRows(layout, plan, state);
    if (!white.ok) return { singular: white.singular };
    const eliminated = eliminate(layout, white.rows, prior);
    const settled = { eliminated, white: white.rows };
    if (!moves || round >= MOST_ROUNDS) return settled;
    const values = bestFit(layout, eliminated);
    const share = round < PATIENCE ? 1 : 0.5;
    if (moveTo(bench, values, share) <= SETTLED) return settled;
  }
}

/** The penalised best values by position, flat unknowns within their bounds. */
export function bestFit(layout: Layout, eliminated: Eliminated): Float64Array {
  const { inner, open, size, bounds } = layout;
  const tail = size - inner;
  const lower = new Float64Array(tail).fill(-Infinity);
  const upper = new Float64Array(tail).fill(Infinity);
  bounds.forEach((one, f) => {
    lower[open - inner + f] = one.lower;
    upper[open - inner + f] = one.upper;
  });
  const values = new Float64Array(size);
  if (tail > 0) values.set(boundedLeastSquares(eliminated.tail, { lower, upper }).values, inner);
  backSubstitute(eliminated, values);
  return values;
}

function startAtReadings(bench: Workbench): void {
  const { layout, state } = bench;
  const { rows, atFit, varying } = layout.problem;
  for (const { row, factor } of layout.bent) {
    // The fit of this row alone; what its own residual says there comes with the first round.
    state.residual[row] = factor.centre - bench.evaluated.base[row]!;
    state.variance[row] = factor.scale ** 2;
  }
  if (layout.moving) {
    for (const i of layout.gaussian) {
      if (rows.kind[i] !== ASYMMETRIC) continue;
      state.variance[i] =
        rows.asymmetric!.plus[i]! * rows.asymmetric!.minus[i]! + rows.variance[i]!;
    }
  }
  atFit.forEach(({ coefficient, level }, f) => {
    const column = state.columns[varying.length + f]!;
    for (let i = 0; i < rows.count; i += 1) {
      column[i] = coefficient[i]! * (level[i]! + state.residual[i]!);
    }
  });
}

/** Moves variances and loadings to those of a fit. @returns the largest share by which one moved */
function moveTo(bench: Workbench, values: Float64Array, share: number): number {
  const { layout, state } = bench;
  let moved = layout.moving ? moveVariances(bench, values, share) : 0;
  if (layout.bent.length > 0) moved = moveTangents(bench, values, share);
  layout.problem.atFit.forEach(({ coefficient, level, of }, f) => {
    const column = state.columns[layout.problem.varying.length + f]!;
    const wanted = new Set(of.map((k) => layout.place[k]!));
    let largest = 0;
    let change = 0;
    for (let i = 0; i < column.length; i += 1) {
      if (coefficient[i] === 0) continue;
      const target = coefficient[i]! * (level[i]! + expectedOf(bench, { i, values, wanted }));
      const next = column[i]! + share * (target - column[i]!);
      change = Math.max(change, Math.abs(next - column[i]!));
      largest = Math.max(largest, Math.abs(next));
      column[i] = next;
    }
    if (largest > 0) moved = Math.max(moved, change / largest);
  });
  return moved;
}

/** mu - y at a fit, y what the row stands for at the moment. */
function distances(bench: Workbench, values: Float64Array): Float64Array {
  const { layout, state } = bench;
  const distance = new Float64Array(layout.problem.rows.count);
  for (const i of layout.gaussian) {
    distance[i] = expectedOf(bench, { i, values, wanted: null }) - state.residual[i]!;
  }
  addProcessValues(bench, distance);
  return distance;
}

/**
 * Replaces each row that isn't linear in mu by its tangent at the fit: the normal row whose
 * residual there, and its slope, are the same (Gauss-Newton).
 */
function moveTangents(bench: Workbench, values: Float64Array, share: number): number {
  const { layout, state, evaluated } = bench;
  const distance = distances(bench, values);
  let moved = 0;
  for (const { row, factor, residual } of layout.bent) {
    const base = evaluated.base[row]!;
    const fitted = base + state.residual[row]! + distance[row]!;
    const before = bench.tangents[row]!;
    const mu = Number.isNaN(before) ? fitted : before + share * (fitted - before);
    bench.tangents[row] = mu;
    moved = Math.max(moved, Math.abs(mu - before) / factor.scale);
    if (Number.isNaN(before)) moved = Infinity;
    const h = 1e-5 * factor.scale;
    const slope = (residual(mu + h) - residual(mu - h)) / (2 * h);
    const flat = FLAT / factor.scale;
    const steep = Math.max(Math.abs(slope), flat);
    state.variance[row] = 1 / (steep * steep);
    // Where it doesn't move with mu, the row says nothing, but what it costs is kept.
    state.residual[row] = mu - base - residual(mu) / (Math.abs(slope) > flat ? slope : -flat);
  }
  return moved;
}

function moveVariances(bench: Workbench, values: Float64Array, share: number): number {
  const { layout, state } = bench;
  const { rows } = layout.problem;
  const distance = distances(bench, values);
  let moved = 0;
  for (const i of layout.gaussian) {
    if (rows.kind[i] !== ASYMMETRIC) continue;
    const { plus, minus } = rows.asymmetric!;
    const extra = rows.variance[i]!;
    const before = state.variance[i]!;
    // What was there to be read has moved with the extra variance's share of the difference.
    const read = (distance[i]! * (before - extra)) / before;
    const target = asymmetricVariance(read, plus[i]!, minus[i]!) + extra;
    const next = before + share * (target - before);
    moved = Math.max(moved, Math.abs(next - before) / before);
    state.variance[i] = next;
  }
  return moved;
}

/** Sum of X_ik z_k over the wanted positions, or over all. */
function expectedOf(
  { layout, state }: Workbench,
  { i, values, wanted }: { i: number; values: Float64Array; wanted: ReadonlySet<number> | null },
): number {
  const { start, position, source, problem } = layout;
  let sum = 0;
  for (let e = start[i]!; e < start[i + 1]!; e += 1) {
    const p = position[e]!;
    if (wanted !== null && !wanted.has(p)) continue;
    const s = source[e]!;
    sum += (s >= 0 ? problem.design.value[s]! : state.columns[-1 - s]![i]!) * values[p]!;
  }
  return sum;
}
