import type { TriangularSystem } from "@weighhouse/numerics/triangular-system";

const MOST_ROWS = 128;

/**
 * Rows waiting to be rotated into a triangular system, many at a time: one reflection a column for
 * a whole block, where `addRow` takes one rotation an entry.
 */
export interface RowBlock {
  system: TriangularSystem;
  /** Columns of `apart` rows each, the right side last. */
  data: Float64Array;
  apart: number;
  count: number;
}

/** @param expected how many rows will come, if that is known */
export function rowBlock(system: TriangularSystem, expected = MOST_ROWS): RowBlock {
  const apart = Math.min(Math.max(expected, 1), MOST_ROWS);
  return { system, data: new Float64Array(apart * (system.size + 1)), apart, count: 0 };
}

/**
 * Makes room for one more row, all zeros.
 *
 * @returns where its first entry is; entry c is `apart` x c further on
 */
export function nextRow(block: RowBlock): number {
  if (block.count === block.apart) flushRows(block);
  block.count += 1;
  return block.count - 1;
}

/**
 * Takes the waiting rows into the system by Householder reflections of [R; rows].
 *
 * Accuracy: each entry of R to a few eps of its column's largest norm.
 * Source: Golub & Van Loan, Matrix Computations, 5.1 and 5.2.
 */
export function flushRows(block: RowBlock): void {
  const { system, data, apart, count } = block;
  const { size, data: triangle } = system;
  if (count === 0) return;
  for (let j = 0; j < size; j += 1) {
    const own = j * apart;
    let below = 0;
    for (let i = own; i < own + count; i += 1) below += data[i]! * data[i]!;
    if (below === 0) continue;
    const start = j * (size + 1);
    const top = triangle[start + j]!;
    const norm = Math.sqrt(top * top + below);
    const head = top > 0 ? top + norm : top - norm;
    const scale = 2 / (head * head + below);
    for (let k = j + 1; k <= size; k += 1) {
      const other = k * apart - own;
      let product = head * triangle[start + k]!;
      for (let i = own; i < own + count; i += 1) product += data[i]! * data[i + other]!;
      const share = product * scale;
      triangle[start + k]! -= share * head;
      for (let i = own; i < own + count; i += 1) data[i + other]! -= share * data[i]!;
    }
    triangle[start + j] = top > 0 ? -norm : norm;
  }
  const right = size * apart;
  for (let i = right; i < right + count; i += 1) system.rss += data[i]! * data[i]!;
  data.fill(0);
  block.count = 0;
}
