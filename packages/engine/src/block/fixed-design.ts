import { whitenSmooth } from "@weighhouse/numerics/kalman-whitening";
import {
  choleskyFactor,
  whiten,
  type CholeskyFactor,
} from "@weighhouse/numerics/symmetric-cholesky";
import type { TriangularSystem } from "@weighhouse/numerics/triangular-system";
import { covarianceOf, type NoisePart } from "./covariance";
import { eliminate, solveNormal, type Eliminated } from "./elimination";
import { smoothNoiseOf, whitenRows, type WhiteRows } from "./whitening";
import type { Workbench } from "./workbench";

/**
 * A block whose columns and variances hang on nothing outer: whitened and eliminated once, and then
 * solved for every new vector of residuals in O(N k).
 */
export interface FixedDesign {
  eliminated: Eliminated;
  logDeterminant: number;
  solve(residual: Float64Array): FixedSolution;
}

export interface FixedSolution {
  /** Best values by position, without bounds. */
  values: Float64Array;
  /** White residuals there, and of the priors. */
  rows: Float64Array;
  priors: Float64Array;
  rss: number;
}

/** Columns nearer to one another than this are left to orthogonal elimination each time. */
const LEAST_ANGLE = 1e-5;
/** Each takes the error down by the square of that condition times eps. */
const REFINEMENTS = 2;

const designs = new WeakMap<Workbench, FixedDesign | null>();

/** @returns null where the design moves, or is too near to singular */
export function fixedDesignOf(bench: Workbench): FixedDesign | null {
  const there = designs.get(bench);
  if (there !== undefined) return there;
  const made = workOut(bench);
  designs.set(bench, made);
  return made;
}

function workOut(bench: Workbench): FixedDesign | null {
  const { layout, plan, prior, state } = bench;
  const { varying, atFit } = layout.problem;
  if (layout.moving || layout.bent.length + varying.length + atFit.length > 0) return null;
  const white = whitenRows(layout, plan, state);
  if (!white.ok) return null;
  const eliminated = eliminate(layout, white.rows, prior);
  if (leastAngle(eliminated, layout) < LEAST_ANGLE) return null;
  const whitenVector = vectorWhitener(bench);
  return {
    eliminated,
    logDeterminant: white.rows.logDeterminant,
    solve: (residual) => {
      whitenVector(residual, white.rows.right);
      return solveBy(bench, white.rows, eliminated);
    },
  };
}

/** The smallest ratio of a diagonal of R to its column's length. */
function leastAngle({ pivots, tail }: Eliminated, { inner, size }: Workbench["layout"]): number {
  const squares = new Float64Array(size);
  for (const { position, value } of pivots) {
    for (let e = 0; e < position.length; e += 1) squares[position[e]!]! += value[e]! ** 2;
  }
  for (let i = 0; i < tail.size; i += 1) {
    for (let k = i; k < tail.size; k += 1) {
      squares[inner + k]! += tail.data[i * (tail.size + 1) + k]! ** 2;
    }
  }
  let least = 1;
  for (let p = 0; p < size; p += 1) {
    const diagonal = p < inner ? pivots[p]!.value[0]! : tail.data[(p - inner) * (tail.size + 2)]!;
    // Of what nothing is known the ratio is 0 / 0, and not above anything.
    const ratio = Math.abs(diagonal) / Math.sqrt(squares[p]!);
    if (!(ratio >= least)) least = Number.isNaN(ratio) ? 0 : ratio;
  }
  return least;
}

/**
 * Corrected semi-normal equations: z = R^-1 R^-T X'r, and once more of what is left over.
 * Source: Bjorck, Linear Algebra Appl. 88/89 (1987) 31.
 */
function solveBy(
  { layout, prior }: Workbench,
  white: WhiteRows,
  eliminated: Eliminated,
): FixedSolution {
  const { count, start, position, value, right } = white;
  const values = new Float64Array(layout.size);
  const rows = right.slice(0, count);
  const priors = new Float64Array(prior.rows.length);
  const step = new Float64Array(layout.size);
  for (let round = 0; layout.size > 0 && round <= REFINEMENTS; round += 1) {
    step.fill(0);
    for (let n = 0; n < count; n += 1) {
      for (let e = start[n]!; e < start[n + 1]!; e += 1)
        step[position[e]!]! += value[e]! * rows[n]!;
    }
    prior.rows.forEach((row, n) => {
      for (let e = 0; e < row.position.length; e += 1) {
        step[row.position[e]!]! += row.value[e]! * priors[n]!;
      }
    });
    solveNormal(eliminated, step);
    for (let p = 0; p < values.length; p += 1) values[p]! += step[p]!;
    for (let n = 0; n < count; n += 1) {
      let rest = right[n]!;
      for (let e = start[n]!; e < start[n + 1]!; e += 1) rest -= value[e]! * values[position[e]!]!;
      rows[n] = rest;
    }
    prior.rows.forEach((row, n) => {
      let rest = 0;
      for (let e = 0; e < row.position.length; e += 1)
        rest -= row.value[e]! * values[row.position[e]!]!;
      priors[n] = rest;
    });
  }
  let rss = 0;
  for (let n = 0; n < count; n += 1) rss += rows[n]! * rows[n]!;
  for (const rest of priors) rss += rest * rest;
  return { values, rows, priors, rss };
}

/** The tail with the right side that has its minimum at a solution, and its rss. */
export function tailAt(
  { tail, pivots }: Eliminated,
  { values, rss }: FixedSolution,
): TriangularSystem {
  const { size } = tail;
  const data = tail.data.slice();
  for (let i = 0; i < size; i += 1) {
    let right = 0;
    for (let k = i; k < size; k += 1)
      right += data[i * (size + 1) + k]! * values[pivots.length + k]!;
    data[i * (size + 1) + size] = right;
  }
  return { size, data, rss };
}

/** Whitens a vector by row into the order of the white rows. */
function vectorWhitener({ layout, plan, state }: Workbench) {
  const { singles, parts } = plan;
  const weights = Float64Array.from(singles, (i) => 1 / Math.sqrt(state.variance[i]!));
  const whiteners = parts.map((part) => partWhitener(layout, part, state.variance));
  return (residual: Float64Array, into: Float64Array) => {
    for (let n = 0; n < singles.length; n += 1) into[n] = residual[singles[n]!]! * weights[n]!;
    let at = singles.length;
    parts.forEach((part, p) => {
      const column = new Float64Array(part.rows.length + part.latents.length);
      part.rows.forEach((i, n) => (column[n] = residual[i]!));
      whiteners[p]!(column);
      into.set(column, at);
      at += column.length;
    });
  };
}

function partWhitener(
  layout: Workbench["layout"],
  part: NoisePart,
  variance: Float64Array,
): (column: Float64Array) => void {
  const noise = smoothNoiseOf(layout, part, variance);
  if (noise !== null) return (column) => void whitenSmooth({ ...noise, columns: [column] });
  const size = part.rows.length + part.latents.length;
  const result = choleskyFactor(covarianceOf(layout, part, variance), size);
  const factor: CholeskyFactor | null = result.ok ? result.factor : null;
  return (column) => {
    if (factor !== null) whiten(factor, column);
  };
}
