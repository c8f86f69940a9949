import type { TriangularSystem } from "@weighhouse/numerics/triangular-system";

const ROWS = 128;

/**
 * Rows waiting to be rotated into a triangular system, many at a time: one reflection a column for
 * a whole block, where `addRow` takes one rotation an entry.
 */
export interface RowBlock {
  system: TriangularSystem;
  /** Columns of 128 rows each, the right side last. */
  data: Float64Array;
  count: number;
}

export function rowBlock(system: TriangularSystem): RowBlock {
  return { system, data: new Float64Array(ROWS * (system.size + 1)), count: 0 };
}

/**
 * Makes room for one more row, all zeros.
 *
 * @returns where its first entry is; entry c is `ROWS_APART` x c further on
 */
export function nextRow(block: RowBlock): number {
  if (block.count === ROWS) flushRows(block);
  block.count += 1;
  return block.count - 1;
}

export const ROWS_APART = ROWS;

/**
 * Takes the waiting rows into the system by Householder reflections of [R; rows].
 *
 * Accuracy: each entry of R to a few eps of its column's largest norm.
 * Source: Golub & Van Loan, Matrix Computations, 5.1 and 5.2.
 */
export function flushRows(block: RowBlock): void {
  const { system, data, count } = block;
  const { size, data: triangle } = system;
  if (count === 0) return;
  for (let j = 0; j < size; j += 1) {
    const own = j * ROWS;
    let below = 0;
    for (let i = own; i < own + count; i += 1) below += data[i]! * data[i]!;
    if (below === 0) continue;
    const start = j * (size + 1);
    const top = triangle[start + j]!;
    const norm = Math.sqrt(top * top + below);
    const head = top > 0 ? top + norm : top - norm;
    const scale = 2 / (head * head + below);
    for (let k = j + 1; k <= size; k += 1) {
      const other = k * ROWS - own;
      let product = head * triangle[start + k]!;
      for (let i = own; i < own + count; i += 1) product += data[i]! * data[i + other]!;
      const share = product * scale;
      triangle[start + k]! -= share * head;
      for (let i = own; i < own + count; i += 1) data[i + other]! -= share * data[i]!;
    }
    triangle[start + j] = top > 0 ? -norm : norm;
  }
  const right = size * ROWS;
  for (let i = right; i < right + count; i += 1) system.rss += data[i]! * data[i]!;
  data.fill(0);
  block.count = 0;
}
