import type { Box } from "@weighhouse/numerics/box";
import {
  addRow,
  createSystem,
  type TriangularSystem,
} from "@weighhouse/numerics/triangular-system";

/** An unknown of which nothing is said is put into the middle, held by this share of its width. */
const HOLD = 1e-9;

/**
 * The t that makes |R t - z|^2 smallest within bounds, by active sets: unknowns at a bound are
 * fixed there as long as the gradient pushes them against it, the others solved for by QR.
 *
 * @param system n unknowns; diagonals of 0 allowed: what isn't known stays in the middle of its
 *   bounds, and at 0 where they are infinite
 * @param box n lower and upper bounds, infinities allowed
 * @returns t, and |R t - z|^2 + rss there
 * Accuracy: unbounded, as the QR; a bound is met exactly.
 * Source: Lawson & Hanson, Solving Least Squares Problems (1974), 23; Stark & Parker, Comput. Stat.
 * 10 (1995) 129.
 */
export function boundedLeastSquares(
  system: TriangularSystem,
  box: Box,
): { values: Float64Array; chiSquare: number } {
  const { size } = system;
  const { lower, upper } = box;
  const values = Float64Array.from(lower, (low, j) => middleOf(low, upper[j]!));
  const held = new Int8Array(size);
  let least = Infinity;
  // Each round fixes or frees one unknown, and a freed one lowers the sum: rounds can't repeat.
  for (let round = 0; round < 100 + 20 * size; round += 1) {
    const free = Array.from(held.keys()).filter((j) => held[j] === 0);
    const solved = solveFree(system, { values, free, box });
    const stop = firstBound(values, { solved, free, box });
    free.forEach((j, c) => (values[j]! += stop.share * (solved[c]! - values[j]!)));
    if (stop.at >= 0) {
      const j = free[stop.at]!;
      held[j] = stop.side;
      values[j] = stop.side < 0 ? lower[j]! : upper[j]!;
      continue;
    }
    const sum = squares(system, values);
    const released = sum < least ? mostWilling(system, values, held) : -1;
    least = sum;
    if (released < 0) break;
    held[released] = 0;
  }
  return { values, chiSquare: squares(system, values) };
}

function middleOf(lower: number, upper: number): number {
  if (lower > -Infinity && upper < Infinity) return (lower + upper) / 2;
  return Math.min(Math.max(0, lower), upper);
}

function solveFree(
  { size, data }: TriangularSystem,
  { values, free, box }: { values: Float64Array; free: readonly number[]; box: Box },
): Float64Array {
  const count = free.length;
  const small = createSystem(count);
  const row = new Float64Array(count + 1);
  free.forEach((j, c) => {
    const width = box.upper[j]! - box.lower[j]!;
    const hold = HOLD / (width < Infinity ? width : 1);
    row.fill(0);
    row[c] = hold;
    row[count] = hold * middleOf(box.lower[j]!, box.upper[j]!);
    addRow(small, row, c);
  });
  const place = new Int32Array(size).fill(-1);
  free.forEach((j, c) => (place[j] = c));
  for (let i = 0; i < size; i += 1) {
    row.fill(0);
    const start = i * (size + 1);
    row[count] = data[start + size]!;
    for (let k = i; k < size; k += 1) {
      if (place[k]! >= 0) row[place[k]!] = data[start + k]!;
      else row[count]! -= data[start + k]! * values[k]!;
    }
    addRow(small, row);
  }
  const solved = new Float64Array(count);
  for (let i = count - 1; i >= 0; i -= 1) {
    let rest = small.data[i * (count + 1) + count]!;
    for (let k = i + 1; k < count; k += 1) rest -= small.data[i * (count + 1) + k]! * solved[k]!;
    solved[i] = rest / small.data[i * (count + 1) + i]!;
  }
  return solved;
}

/** How far towards the solution the first bound is met; at -1, share 1 where none is. */
function firstBound(
  values: Float64Array,
  { solved, free, box }: { solved: Float64Array; free: readonly number[]; box: Box },
): { share: number; at: number; side: -1 | 1 } {
  let found: { share: number; at: number; side: -1 | 1 } = { share: 1, at: -1, side: 1 };
  free.forEach((j, c) => {
    const step = solved[c]! - values[j]!;
    const below = solved[c]! < box.lower[j]!;
    if (!below && !(solved[c]! > box.upper[j]!)) return;
    const bound = below ? box.lower[j]! : box.upper[j]!;
    const share = Math.max((bound - values[j]!) / step, 0);
    if (share < found.share || found.at < 0) found = { share, at: c, side: below ? -1 : 1 };
  });
  return found;
}

/** The held unknown whose release lowers the sum most for its size; -1 for none. */
function mostWilling(
  { size, data }: TriangularSystem,
  values: Float64Array,
  held: Int8Array,
): number {
  const gradient = new Float64Array(size);
  const norm = new Float64Array(size);
  let length = 0;
  for (let i = 0; i < size; i += 1) {
    const start = i * (size + 1);
    let residual = -data[start + size]!;
    for (let k = i; k < size; k += 1) residual += data[start + k]! * values[k]!;
    length += residual * residual;
    for (let k = i; k < size; k += 1) {
      gradient[k]! += data[start + k]! * residual;
      norm[k]! += data[start + k]! ** 2;
    }
  }
  let most = -1;
  let largest = 1e-13 * Math.sqrt(length);
  for (let j = 0; j < size; j += 1) {
    const pull = norm[j]! > 0 ? (held[j]! * gradient[j]!) / Math.sqrt(norm[j]!) : 0;
    if (pull > largest) {
      largest = pull;
      most = j;
    }
  }
  return most;
}

function squares({ size, data, rss }: TriangularSystem, values: Float64Array): number {
  let sum = rss;
  for (let i = 0; i < size; i += 1) {
    const start = i * (size + 1);
    let residual = -data[start + size]!;
    for (let k = i; k < size; k += 1) residual += data[start + k]! * values[k]!;
    sum += residual * residual;
  }
  return sum;
}
