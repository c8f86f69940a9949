/**
 * A P = Q R by Householder reflections, the column with the most left in it first.
 *
 * `columns` holds the reflections and, above the diagonal, R, column by column, `rows` numbers each;
 * R's diagonal is apart. Column k of R belongs to column `order[k]` of A.
 */
export interface PivotedQr {
  rows: number;
  size: number;
  columns: Float64Array;
  diagonal: Float64Array;
  order: Int32Array;
}

/**
 * Factors a matrix in place.
 *
 * @param columns `size` columns of `rows` numbers; used up
 * Accuracy: each column of A to a few rows * eps of its norm.
 * Source: Businger & Golub, Numer. Math. 7 (1965) 269; Golub & Van Loan, Matrix Computations, 5.4.
 */
export function pivotedQr(columns: Float64Array, rows: number, size: number): PivotedQr {
  const order = Int32Array.from({ length: size }, (_, j) => j);
  const diagonal = new Float64Array(size);
  const qr = { rows, size, columns, diagonal, order };
  for (let k = 0; k < Math.min(rows, size); k += 1) {
    swapColumns(qr, k, largestColumn(qr, k));
    diagonal[k] = reflect(qr, k);
  }
  return qr;
}

/** Replaces v, `rows` long, by Q' v. */
export function applyTransposed({ rows, size, columns }: PivotedQr, v: Float64Array): void {
  for (let k = 0; k < Math.min(rows, size); k += 1)
    applyReflection(columns, k * rows, k, rows, v, 0);
}

/** R_ik, 0 below the diagonal. */
export function upperEntry({ rows, columns, diagonal }: PivotedQr, i: number, k: number): number {
  return i === k ? diagonal[k]! : i < k ? columns[k * rows + i]! : 0;
}

/** The norm of [begin, end), scaled where squares overflow or vanish. */
export function norm(v: Float64Array, begin = 0, end = v.length): number {
  let plain = 0;
  for (let i = begin; i < end; i += 1) plain += v[i]! * v[i]!;
  if (plain > 1e-280 && plain < 1e280) return Math.sqrt(plain);
  let largest = 0;
  for (let i = begin; i < end; i += 1) largest = Math.max(largest, Math.abs(v[i]!));
  if (largest === 0 || !(largest < Infinity)) return largest;
  let sum = 0;
  for (let i = begin; i < end; i += 1) sum += (v[i]! / largest) ** 2;
  return largest * Math.sqrt(sum);
}

/** The remaining norms are computed afresh: updating them cancels where columns nearly depend. */
function largestColumn({ rows, size, columns }: PivotedQr, k: number): number {
  let best = k;
  let largest = -1;
  for (let j = k; j < size; j += 1) {
    const left = norm(columns, j * rows + k, (j + 1) * rows);
    if (left > largest) {
      largest = left;
      best = j;
    }
  }
  return best;
}

function swapColumns({ rows, columns, order }: PivotedQr, k: number, j: number): void {
  if (k === j) return;
  for (let i = 0; i < rows; i += 1) {
    const kept = columns[k * rows + i]!;
    columns[k * rows + i] = columns[j * rows + i]!;
    columns[j * rows + i] = kept;
  }
  const kept = order[k]!;
  order[k] = order[j]!;
  order[j] = kept;
}

/** Makes column k's reflection v, v_k = 1 + |x_k| / norm, and applies it to the columns after it. */
function reflect({ rows, size, columns }: PivotedQr, k: number): number {
  const start = k * rows;
  let length = norm(columns, start + k, start + rows);
  if (length === 0) return 0;
  if (columns[start + k]! < 0) length = -length;
  for (let i = k; i < rows; i += 1) columns[start + i] = columns[start + i]! / length;
  columns[start + k] = columns[start + k]! + 1;
  for (let j = k + 1; j < size; j += 1) applyReflection(columns, start, k, rows, columns, j * rows);
  return -length;
}

/** v - (u . v / u_k) u over rows k on, of v at `offset`; nothing where the reflection is empty. */
function applyReflection(
  columns: Float64Array,
  start: number,
  k: number,
  rows: number,
  v: Float64Array,
  offset: number,
): void {
  const head = columns[start + k]!;
  if (head === 0) return;
  let sum = 0;
  for (let i = k; i < rows; i += 1) sum += columns[start + i]! * v[offset + i]!;
  const share = sum / head;
  for (let i = k; i < rows; i += 1) v[offset + i] = v[offset + i]! - share * columns[start + i]!;
}
