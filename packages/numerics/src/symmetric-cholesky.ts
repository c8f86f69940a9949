/** C = L L' of a symmetric matrix C: `lower` holds L row by row, zeros above its diagonal. */
export interface CholeskyFactor {
  size: number;
  lower: Float64Array;
}

/** `at` is the first row that is a linear combination of the ones before it, or negative. */
export type CholeskyResult = { ok: true; factor: CholeskyFactor } | { ok: false; at: number };

/**
 * Cholesky factor of a small symmetric matrix, taken of its correlations C_ij / sqrt(C_ii C_jj), so
 * that rows in different units don't decide what counts as singular.
 *
 * @param matrix `size` rows of `size` numbers; the lower triangle is read
 * @returns the factor; or, where C isn't positive definite to working accuracy (a diagonal entry not
 *   finite and > 0, or a pivot of the correlations not above 4 size 2^-52), the row that shows it
 * Accuracy: L L' = C to size * 2^-52 of sqrt(C_ii C_jj).
 * Source: Higham, Accuracy and Stability of Numerical Algorithms, 2nd ed., 10.1 (theorem 10.5: with
 * the diagonal scaled to 1, what is lost depends on the correlations' condition alone).
 */
export function choleskyFactor(matrix: ArrayLike<number>, size: number): CholeskyResult {
  const scale = new Float64Array(size);
  for (let i = 0; i < size; i += 1) {
    const variance = matrix[i * size + i]!;
    if (!(variance > 0 && variance < Infinity)) return { ok: false, at: i };
    scale[i] = Math.sqrt(variance);
  }
  const lower = new Float64Array(size * size);
  const threshold = 4 * size * 2 ** -52;
  for (let i = 0; i < size; i += 1) {
    let pivot = 1;
    for (let j = 0; j < i; j += 1) {
      let sum = matrix[i * size + j]! / scale[i]! / scale[j]!;
      for (let k = 0; k < j; k += 1) sum -= lower[i * size + k]! * lower[j * size + k]!;
      const entry = sum / lower[j * size + j]!;
      lower[i * size + j] = entry;
      pivot -= entry * entry;
    }
    if (!(pivot > threshold)) return { ok: false, at: i };
    lower[i * size + i] = Math.sqrt(pivot);
  }
  for (let i = 0; i < size; i += 1) {
    for (let j = 0; j <= i; j += 1) lower[i * size + j] = lower[i * size + j]! * scale[i]!;
  }
  return { ok: true, factor: { size, lower } };
}

/** ln |C| = 2 sum ln L_ii. */
export function logDeterminant({ size, lower }: CholeskyFactor): number {
  let sum = 0;
  for (let i = 0; i < size; i += 1) sum += Math.log(lower[i * size + i]!);
  return 2 * sum;
}

/** Replaces v by L^-1 v, whose entries have unit variance where v's covariance is C. */
export function whiten({ size, lower }: CholeskyFactor, v: Float64Array): void {
  for (let i = 0; i < size; i += 1) {
    let sum = v[i]!;
    for (let k = 0; k < i; k += 1) sum -= lower[i * size + k]! * v[k]!;
    v[i] = sum / lower[i * size + i]!;
  }
}

/** Replaces v by C^-1 v. */
export function solveSymmetric(factor: CholeskyFactor, v: Float64Array): void {
  const { size, lower } = factor;
  whiten(factor, v);
  for (let i = size - 1; i >= 0; i -= 1) {
    let sum = v[i]!;
    for (let k = i + 1; k < size; k += 1) sum -= lower[k * size + i]! * v[k]!;
    v[i] = sum / lower[i * size + i]!;
  }
}
