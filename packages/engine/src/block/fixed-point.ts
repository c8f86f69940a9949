import { asymmetricVariance } from "./asymmetric";
import { boundedLeastSquares } from "./bounded-least-squares";
import { backSubstitute, eliminate, type Eliminated } from "./elimination";
import type { BentRow, Layout } from "./layout";
import { ASYMMETRIC } from "./problem";
import { addProcessValues } from "./process-values";
import { lowestAlongLines, type LowestFit } from "./line-search";
import { rowSum } from "./row-sum";
import { moveTangents, startTangents } from "./tangents";
import { whitenRows, type WhiteRows } from "./whitening";
import { workOfRound } from "./work";
import type { Workbench } from "./workbench";

/** Variances and loadings have settled when none moves by more than this share. */
const SETTLED = 1e-12;
const MOST_ROUNDS = 200;
/** Steps are halved each time that so many rounds are over: what swings then comes to rest. */
const PATIENCE = 20;
/** Of rows that aren't linear in mu, from so many on fewer starts are tried. */
const MANY = 200;

export interface Settled {
  eliminated: Eliminated;
  white: WhiteRows;
  /** The best values by position, where they aren't those that the eliminated rows give. */
  values?: Float64Array;
}

/**
 * Whitens and eliminates; where variances, loadings or tangents hang on the penalised best fit,
 * again and again until they are those at the fit that they themselves give. Variances and loadings
 * start at the readings, tangents at several places, of which the lowest fit is kept.
 */
export function settle(bench: Workbench): Settled | { singular: number[] } {
  const { layout } = bench;
  if (layout.bent.length === 0) {
    // Given outer values come by the thousand, one near to the next.
    const again = bench.settled && layout.problem.outer.length > 0;
    if (moves(bench) && !again) startAtReadings(bench);
    bench.settled = true;
    return iterate(bench);
  }
  let best: (LowestFit & { settled: Settled }) | null = null;
  for (const placeOf of startsOf(bench)) {
    startTangents(bench, placeOf);
    startAtReadings(bench);
    const settled = iterate(bench);
    if ("singular" in settled) return settled;
    const lowest = lowestAlongLines(bench, settled, bestFit(layout, settled.eliminated));
    if (best === null || lowest.chiSquare < best.chiSquare) best = { ...lowest, settled };
  }
  const { settled, values } = best!;
  return { ...settled, values };
}

/** The readings themselves, what is expected of them, and both sides of each reading. */
function startsOf({ layout, evaluated }: Workbench): ((row: BentRow) => number)[] {
  const starts = [
    ({ factor }: BentRow) => factor.centre,
    ({ row }: BentRow) => evaluated.base[row]!,
    ({ factor }: BentRow) => Math.max(factor.centre, ...factor.breaks) + factor.scale,
    ({ factor }: BentRow) => Math.min(factor.centre, ...factor.breaks) - factor.scale,
  ];
  return layout.bent.length > MANY ? starts.slice(0, 2) : starts;
}

function moves({ layout }: Workbench): boolean {
  return layout.moving || layout.bent.length > 0 || layout.problem.atFit.length > 0;
}

function iterate(bench: Workbench): Settled | { singular: number[] } {
  const { layout, plan, prior, state } = bench;
  const enough = bench.settledTo ?? SETTLED;
  const work = workOfRound(layout);
  for (let round = 0; ; round += 1) {
    bench.work += work;
    const white = whitenRows(layout, plan, state);
    if (!white.ok) return { singular: white.singular };
    const eliminated = eliminate(layout, white.rows, prior);
    const settled = { eliminated, white: white.rows };
    if (!moves(bench) || round >= MOST_ROUNDS) return settled;
    const values = bestFit(layout, eliminated);
    const share = 0.5 ** Math.floor(round / PATIENCE);
    if (moveTo(bench, values, share) <= enough) return settled;
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
  if (layout.bent.length > 0) {
    const distance = distances(bench, values);
    const fittedOf = (row: number) =>
      bench.evaluated.base[row]! + state.residual[row]! + distance[row]!;
    moved = moveTangents(bench, fittedOf, share);
  }
  layout.problem.atFit.forEach(({ coefficient, level, of }, f) => {
    const column = state.columns[layout.problem.varying.length + f]!;
    const wanted = new Set(of.map((k) => layout.place[k]!));
    let largest = 0;
    let change = 0;
    for (let i = 0; i < column.length; i += 1) {
      if (coefficient[i] === 0) continue;
      const target = coefficient[i]! * (level[i]! + rowSum(bench, i, values, wanted));
      const next = column[i]! + share * (target - column[i]!);
      change = Math.max(change, Math.abs(target - column[i]!));
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
    distance[i] = rowSum(bench, i, values) - state.residual[i]!;
  }
  addProcessValues(bench, distance);
  return distance;
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
    moved = Math.max(moved, Math.abs(target - before) / before);
    state.variance[i] = next;
  }
  return moved;
}
