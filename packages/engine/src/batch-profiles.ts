import { addRow } from "@weighhouse/numerics/triangular-system";
import type { BatchKinds } from "./batch-kinds";
import type { Marginal, Part } from "./marginal-form";
import { LOG_VARIANCE, MEAN, placeOf, SQUARES, WEIGHT, type Sums } from "./sums";

/** A pivot of less than this share of its diagonal is rounding: nothing is known in that direction. */
const ROUNDING = 1e-14;

/**
 * What a measurand's groups in summed batches say, apart from what the batches' draws take away
 * again: sums of x' lambda x - 2 right' x + square over x = (level, open draws). Hangs on nothing
 * else, so every set of measurands adds up the same profiles.
 */
export interface Profile {
  /** Open draws, in increasing order. */
  open: number[];
  lambda: Float64Array;
  right: Float64Array;
  square: number;
  logNorm: number;
  squares: number;
  /**
   * Per batch, per error drawn per batch, a row against: those errors' draws, y, the level, the
   * open draws. `batches` has the batch of each.
   */
  batches: number[];
  rows: Float64Array;
}

export function profileOf(sums: Sums, kinds: BatchKinds, { measurand, noise }: Part): Profile {
  const own = sums.measurands[measurand]!;
  const groups: number[] = [];
  const drawn = new Set<number>();
  const entries = new Map<number, number>();
  own.patterns.forEach((pattern, group) => {
    const batch = kinds.ofPattern[pattern]!;
    if (batch < 0 || kinds.kinds[batch] !== "summed") return;
    groups.push(group);
    if (!entries.has(batch)) entries.set(batch, entries.size);
    for (const draw of sums.patterns[pattern]!.draws) {
      if (sums.draws[draw]!.batch === null) drawn.add(draw);
    }
  });
  const open = [...drawn].sort((a, b) => a - b);
  const per = kinds.errors.length;
  const size = 1 + open.length;
  const profile: Profile = {
    open,
    lambda: new Float64Array(size * size),
    right: new Float64Array(size),
    square: 0,
    logNorm: 0,
    squares: 0,
    batches: [...entries.keys()],
    rows: new Float64Array(entries.size * per * (per + 1 + size)),
  };
  // A draw's place in a row: by its error for the batch's own, after them for open ones.
  const places = new Map(open.map((draw, i) => [draw, per + 2 + i]));
  const errors = new Map(kinds.errors.map((error, i) => [error, i]));
  const columns: number[] = [];
  const values: number[] = [];
  for (const group of groups) {
    const pattern = own.patterns[group]!;
    const { draws, loadings } = sums.patterns[pattern]!;
    columns.length = 0;
    values.length = 0;
    for (let i = 0; i < draws.length; i += 1) {
      const { error, batch } = sums.draws[draws[i]!]!;
      columns.push(batch === null ? places.get(draws[i]!)! : errors.get(error)!);
      values.push(loadings[i]!);
    }
    columns.push(per + 1);
    values.push(1);
    const at = placeOf(own, group, noise);
    profile.squares += own.sums[at + SQUARES]!;
    profile.logNorm -= own.sums[at + LOG_VARIANCE]! / 2;
    const entry = entries.get(kinds.ofPattern[pattern]!)!;
    const weight = own.sums[at + WEIGHT]!;
    addEquation(profile, { per, entry, columns, values, weight, mean: own.sums[at + MEAN]! });
  }
  return profile;
}

/** Adds w (x - mean)^2 for x = sum of values at columns: own draws, then y's place, level, open draws. */
function addEquation(
  profile: Profile,
  equation: {
    per: number;
    entry: number;
    columns: readonly number[];
    values: readonly number[];
    weight: number;
    mean: number;
  },
): void {
  const { per, entry, columns, values, weight, mean } = equation;
  const size = profile.right.length;
  const width = per + 1 + size;
  for (let i = 0; i < columns.length; i += 1) {
    const column = columns[i]!;
    const load = weight * values[i]!;
    if (column < per) {
      const start = (entry * per + column) * width;
      profile.rows[start + per]! += load * mean;
      for (let j = 0; j < columns.length; j += 1) {
        profile.rows[start + columns[j]!]! += load * values[j]!;
      }
    } else {
      const place = column - per - 1;
      profile.right[place]! += load * mean;
      for (let j = 0; j < columns.length; j += 1) {
        const other = columns[j]! - per - 1;
        if (other >= 0) profile.lambda[place * size + other]! += load * values[j]!;
      }
    }
  }
  profile.square += weight * mean * mean;
}

/**
 * Adds the summed batches of a set of parts to its marginal. Each batch's draws are eliminated by
 * the Schur complement,
 *
 *   lambda - v' d^-1 v,  d = 1 + sum w z z',  v = sum w z x'
 *
 * which takes O(k^2) a batch however many measurements it has; what is left is added as the rows
 * of its Cholesky factor.
 *
 * @param columns places of the open draws in the marginal; levels are their parts' places
 */
export function addProfiles(
  marginal: Marginal,
  profiles: readonly Profile[],
  { kinds, columns }: { kinds: BatchKinds; columns: ReadonlyMap<number, number> },
): void {
  if (profiles.every(({ batches }) => batches.length === 0)) return;
  const { size } = marginal.system;
  const lambda = new Float64Array(size * size);
  const right = new Float64Array(size);
  let square = 0;
  const per = kinds.errors.length;
  const width = per + 1 + size;
  const rows = new Float64Array(kinds.names.length * per * width);
  const present = new Uint8Array(kinds.names.length);
  profiles.forEach((profile, level) => {
    const places = [level, ...profile.open.map((draw) => columns.get(draw)!)];
    marginal.logNorm += profile.logNorm;
    marginal.squares += profile.squares;
    square += profile.square;
    places.forEach((place, i) => {
      right[place]! += profile.right[i]!;
      places.forEach((other, j) => {
        lambda[place * size + other]! += profile.lambda[i * places.length + j]!;
      });
    });
    addBatchRows(rows, profile, { per, width, places, present });
  });
  const scale = Float64Array.from(right, (_, i) => lambda[i * size + i]!);
  for (let batch = 0; batch < present.length; batch += 1) {
    if (present[batch] === 0) continue;
    const own = rows.subarray(batch * per * width, (batch + 1) * per * width);
    for (let i = 0; i < per; i += 1) {
      const row = eliminated(own, { i, per, width });
      marginal.logNorm -= row.logPivot;
      const e = row.values[0]!;
      square -= e * e;
      subtract(lambda, right, row.values);
    }
  }
  addFactor(marginal, { lambda, right, square, scale });
}

function addBatchRows(
  rows: Float64Array,
  profile: Profile,
  {
    per,
    width,
    places,
    present,
  }: { per: number; width: number; places: readonly number[]; present: Uint8Array },
): void {
  const from = per + 1 + places.length;
  profile.batches.forEach((batch, entry) => {
    for (let i = 0; i < per; i += 1) {
      const source = (entry * per + i) * from;
      const target = (batch * per + i) * width;
      // The prior N(0, 1) of each draw, once.
      if (present[batch] === 0) rows[target + i] = 1;
      for (let k = 0; k <= per; k += 1) rows[target + k]! += profile.rows[source + k]!;
      for (let k = 0; k < places.length; k += 1) {
        rows[target + per + 1 + places[k]!]! += profile.rows[source + per + 1 + k]!;
      }
    }
    present[batch] = 1;
  });
}

/** Row i of a batch divided by the root of its pivot, and taken out of the rows after it. */
function eliminated(
  rows: Float64Array,
  { i, per, width }: { i: number; per: number; width: number },
): { logPivot: number; values: Float64Array } {
  const start = i * width;
  const pivot = Math.sqrt(rows[start + i]!);
  for (let k = i; k < width; k += 1) rows[start + k] = rows[start + k]! / pivot;
  for (let j = i + 1; j < per; j += 1) {
    const factor = rows[start + j]!;
    for (let k = j; k < width; k += 1) rows[j * width + k]! -= factor * rows[start + k]!;
  }
  return { logPivot: Math.log(pivot), values: rows.subarray(start + per, start + width) };
}

/** @param values against y, then against the columns */
function subtract(lambda: Float64Array, right: Float64Array, values: Float64Array): void {
  const size = right.length;
  const e = values[0]!;
  for (let i = 0; i < size; i += 1) {
    const v = values[i + 1]!;
    if (v === 0) continue;
    const start = i * size;
    for (let j = i; j < size; j += 1) lambda[start + j] = lambda[start + j]! - v * values[j + 1]!;
    right[i] = right[i]! - v * e;
  }
}

/** Adds sums as equations: the rows of lambda's Cholesky factor, where there is something to know. */
function addFactor(
  marginal: Marginal,
  {
    lambda,
    right,
    square,
    scale,
  }: { lambda: Float64Array; right: Float64Array; square: number; scale: Float64Array },
): void {
  const size = right.length;
  let rest = square;
  for (let i = 0; i < size; i += 1) {
    const start = i * size;
    const pivot = lambda[start + i]!;
    if (!(pivot > ROUNDING * scale[i]!)) continue;
    const root = Math.sqrt(pivot);
    const row = new Float64Array(size + 1);
    for (let k = i; k < size; k += 1) row[k] = lambda[start + k]! / root;
    row[size] = right[i]! / root;
    rest -= row[size] * row[size];
    for (let j = i + 1; j < size; j += 1) {
      const factor = row[j]!;
      if (factor === 0) continue;
      for (let k = j; k < size; k += 1) lambda[j * size + k]! -= factor * row[k]!;
      right[j]! -= factor * row[size]!;
    }
    addRow(marginal.system, row, i);
  }
  marginal.squares += Math.max(rest, 0);
}
