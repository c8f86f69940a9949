import { whitenSmooth, type SmoothNoise } from "@weighhouse/numerics/kalman-whitening";
import {
  choleskyFactor,
  logDeterminant,
  whiten as whitenByFactor,
} from "@weighhouse/numerics/symmetric-cholesky";
import { covarianceOf, type NoisePart, type NoisePlan } from "./covariance";
import type { Layout } from "./layout";

/** Gaussian rows as equations of unit variance: sum of value z = right. */
export interface WhiteRows {
  count: number;
  start: Int32Array;
  /** Increasing within each row, a position may come twice. */
  position: Int32Array;
  value: Float64Array;
  right: Float64Array;
  /** ln of the noises' determinant. */
  logDeterminant: number;
}

/** What the rows are at given values of everything outer. */
export interface RowState {
  /** observed - base, wrapped; by row. */
  residual: Float64Array;
  /** By row; of those that are taken as Gaussian. */
  variance: Float64Array;
  /** The moving columns, by row. */
  columns: readonly Float64Array[];
}

export type Whitened = { ok: true; rows: WhiteRows } | { ok: false; singular: number[] };

/**
 * A smooth process's value at a row that isn't Gaussian is known to be what it is: a row of no
 * noise, but for this share of the process's variance, so that the filter's gain stays below 1.
 */
const NO_NOISE = 1e-15;

/**
 * Whitens the Gaussian rows: one by one where noises are independent, by a small Cholesky for a
 * correlation group, by the Kalman filter for a smooth process, by one Cholesky where they share
 * rows. Values of processes at other rows come as rows of right side 0 and coefficient -1.
 *
 * O(N) a column but for the small Cholesky's.
 */
export function whitenRows(layout: Layout, plan: NoisePlan, state: RowState): Whitened {
  const rows = emptyRows(layout, plan);
  const singular = whitenSingles(layout, plan.singles, { state, rows });
  if (singular.length > 0) return { ok: false, singular };
  for (const part of plan.parts) {
    const wrong = whitenPart(layout, part, { state, rows });
    if (wrong.length > 0) return { ok: false, singular: wrong };
  }
  return { ok: true, rows };
}

function emptyRows(layout: Layout, { singles, parts }: NoisePlan): WhiteRows {
  let entries = 0;
  let count = singles.length;
  for (const i of singles) entries += layout.start[i + 1]! - layout.start[i]!;
  for (const { rows, latents, positions } of parts) {
    count += rows.length + latents.length;
    entries += (rows.length + latents.length) * positions.length;
  }
  return {
    count: 0,
    start: new Int32Array(count + 1),
    position: new Int32Array(entries),
    value: new Float64Array(entries),
    right: new Float64Array(count),
    logDeterminant: 0,
  };
}

interface Work {
  state: RowState;
  rows: WhiteRows;
}

function whitenSingles(
  { start, position, source, problem }: Layout,
  singles: Int32Array,
  { state, rows }: Work,
): number[] {
  const singular: number[] = [];
  const { residual, variance, columns } = state;
  const fixed = problem.design.value;
  let at = 0;
  let logVariance = 0;
  for (let n = 0; n < singles.length; n += 1) {
    const i = singles[n]!;
    const v = variance[i]!;
    if (!(v > 0)) singular.push(i);
    const weight = 1 / Math.sqrt(v);
    logVariance += Math.log(v);
    for (let e = start[i]!; e < start[i + 1]!; e += 1) {
      const s = source[e]!;
      rows.position[at] = position[e]!;
      rows.value[at] = (s >= 0 ? fixed[s]! : columns[-1 - s]![i]!) * weight;
      at += 1;
    }
    rows.right[n] = residual[i]! * weight;
    rows.start[n + 1] = at;
  }
  rows.count = singles.length;
  rows.logDeterminant = logVariance;
  return singular;
}

function whitenPart(layout: Layout, part: NoisePart, { state, rows }: Work): number[] {
  const columns = columnsOf(layout, part, state);
  const noise = smoothNoiseOf(layout, part, state.variance);
  if (noise !== null) {
    const bad = part.rows.filter((i) => !(state.variance[i]! > 0));
    if (bad.length > 0) return bad;
    rows.logDeterminant += whitenSmooth({ ...noise, columns });
  } else {
    const matrix = covarianceOf(layout, part, state.variance);
    const size = part.rows.length + part.latents.length;
    const result = choleskyFactor(matrix, size);
    if (!result.ok) return part.rows;
    for (const column of columns) whitenByFactor(result.factor, column);
    rows.logDeterminant += logDeterminant(result.factor);
  }
  const { positions } = part;
  const right = columns[positions.length]!;
  let at = rows.start[rows.count]!;
  for (let n = 0; n < right.length; n += 1) {
    for (let c = 0; c < positions.length; c += 1) {
      const value = columns[c]![n]!;
      if (value === 0) continue;
      rows.position[at] = positions[c]!;
      rows.value[at] = value;
      at += 1;
    }
    rows.right[rows.count] = right[n]!;
    rows.count += 1;
    rows.start[rows.count] = at;
  }
  return [];
}

/** The part's columns, one a position, and the residuals last. */
function columnsOf(
  { start, position, source, problem, latents }: Layout,
  part: NoisePart,
  { residual, columns: moving }: RowState,
): Float64Array[] {
  const size = part.rows.length + part.latents.length;
  const columns = Array.from({ length: part.positions.length + 1 }, () => new Float64Array(size));
  const place = new Map(Array.from(part.positions, (p, c) => [p, c]));
  part.rows.forEach((i, n) => {
    for (let e = start[i]!; e < start[i + 1]!; e += 1) {
      const s = source[e]!;
      const value = s >= 0 ? problem.design.value[s]! : moving[-1 - s]![i]!;
      columns[place.get(position[e]!)!]![n]! += value;
    }
    columns.at(-1)![n] = residual[i]!;
  });
  part.latents.forEach((l, k) => {
    columns[place.get(latents[l]!.position)!]![part.rows.length + k] = -1;
  });
  return columns;
}

/** What the Kalman filter needs of a part that is one smooth process; null for another part. */
export function smoothNoiseOf(
  layout: Layout,
  { rows, latents, groups, processes }: NoisePart,
  variance: Float64Array,
): Omit<SmoothNoise, "columns"> | null {
  if (groups.length > 0 || processes.length !== 1) return null;
  const process = layout.problem.rows.smooth[processes[0]!]!;
  const { sd, length } = process;
  const place = new Map(Array.from(process.rows, (i, k) => [i, process.x[k]!]));
  const x = [...rows.map((i) => place.get(i)!), ...latents.map((l) => layout.latents[l]!.x)];
  const own = [...rows.map((i) => variance[i]!), ...latents.map(() => NO_NOISE * sd * sd)];
  return { x, variance: own, sd, length };
}
