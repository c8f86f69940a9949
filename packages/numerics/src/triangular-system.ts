/**
 * A least-squares problem in square-root form, |R x - z|^2 + rss, with R upper triangular.
 *
 * `data` holds R and z, row by row, each row `size + 1` long with z last. A row whose diagonal is 0
 * is 0 throughout: nothing is known in that direction yet.
 *
 * R'R is the small matrix of Woodbury's identity, and R its Cholesky factor, but made by rotations
 * of the rows themselves. Forming R'R first would square the ratio of the largest to the smallest
 * uncertainty: with a tolerance of 1 and measurements of 1e-6 all digits of the determinant go.
 */
export interface TriangularSystem {
  size: number;
  data: Float64Array;
  rss: number;
}

export function createSystem(size: number): TriangularSystem {
  return { size, data: new Float64Array(size * (size + 1)), rss: 0 };
}

/**
 * Adds an equation `row . x = row[size]` of unit variance by Givens rotations: O(size^2).
 *
 * @param row coefficients and right-hand side, `size + 1` long; used up
 * @param first column of the first coefficient that isn't 0, when the caller knows
 * Accuracy: each entry of R and z to a few eps of its column's largest norm.
 * Source: Golub & Van Loan, Matrix Computations, 5.1 and 6.5 (adding a row).
 */
export function addRow(system: TriangularSystem, row: Float64Array, first = 0): void {
  const { size, data } = system;
  const width = size + 1;
  for (let j = first; j < size; j += 1) {
    const below = row[j]!;
    if (below === 0) continue;
    const start = j * width;
    const diagonal = data[start + j]!;
    if (diagonal === 0) {
      for (let k = j; k < width; k += 1) data[start + k] = row[k]!;
      return;
    }
    let c: number;
    let s: number;
    if (Math.abs(diagonal) > Math.abs(below)) {
      const t = below / diagonal;
      c = 1 / Math.sqrt(1 + t * t);
      s = t * c;
    } else {
      const t = diagonal / below;
      s = 1 / Math.sqrt(1 + t * t);
      c = t * s;
    }
    for (let k = j; k < width; k += 1) {
      const upper = data[start + k]!;
      const lower = row[k]!;
      data[start + k] = c * upper + s * lower;
      row[k] = c * lower - s * upper;
    }
  }
  system.rss += row[size]! * row[size]!;
}

/** Gives unknown j the prior N(0, 1), before anything else is known of it. */
export function setUnitPrior(system: TriangularSystem, j: number): void {
  system.data[j * (system.size + 1) + j] = 1;
}

/** Sum of ln |R_jj| over [begin, end). */
export function logDiagonal(system: TriangularSystem, begin: number, end: number): number {
  let sum = 0;
  for (let j = begin; j < end; j += 1) {
    sum += Math.log(Math.abs(system.data[j * (system.size + 1) + j]!));
  }
  return sum;
}
