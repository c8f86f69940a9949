import { applyTransposed, norm, pivotedQr, upperEntry } from "./pivoted-qr";
import { addRow, createSystem, type TriangularSystem } from "./triangular-system";

/** `count` rows of `size` derivatives. */
export interface JacobianRows {
  size: number;
  count: number;
  jacobian: Float64Array;
}

/**
 * R and Q'r of some of the Jacobian's columns, by pivoted QR.
 *
 * @param chosen which columns; `order` says which of them each column of R is
 * @param residuals `count` long
 */
export function columnSystem(
  { size, count, jacobian }: JacobianRows,
  chosen: readonly number[],
  residuals: Float64Array,
): { system: TriangularSystem; order: number[] } {
  const columns = new Float64Array(count * chosen.length);
  chosen.forEach((j, k) => {
    for (let i = 0; i < count; i += 1) columns[k * count + i] = jacobian[i * size + j]!;
  });
  const qr = pivotedQr(columns, count, chosen.length);
  const right = residuals.slice();
  applyTransposed(qr, right);
  const system = createSystem(chosen.length);
  const width = chosen.length + 1;
  for (let i = 0; i < Math.min(count, chosen.length); i += 1) {
    if (qr.diagonal[i] === 0) break;
    for (let k = i; k < chosen.length; k += 1) system.data[i * width + k] = upperEntry(qr, i, k);
    system.data[i * width + chosen.length] = right[i]!;
  }
  return { system, order: Array.from(qr.order, (k) => chosen[k]!) };
}

/** How many of its columns, scaled to one length, are independent to working accuracy. */
export function scaledRank({ size, count, jacobian }: JacobianRows): number {
  const columns = new Float64Array(count * size);
  for (let j = 0; j < size; j += 1) {
    const column = columns.subarray(j * count, (j + 1) * count);
    for (let i = 0; i < count; i += 1) column[i] = jacobian[i * size + j]!;
    const length = norm(column) || 1;
    for (let i = 0; i < count; i += 1) column[i] = column[i]! / length;
  }
  const { diagonal } = pivotedQr(columns, count, size);
  const threshold = Math.max(count, size) * 2 ** -52 * Math.abs(diagonal[0] ?? 0);
  return diagonal.filter((value) => Math.abs(value) > threshold).length;
}

/** Upper triangular R with R'R = J'J, row by row, its columns in their order. */
export function triangularFactor({ size, count, jacobian }: JacobianRows): Float64Array {
  const system = createSystem(size);
  const row = new Float64Array(size + 1);
  for (let i = 0; i < count; i += 1) {
    row.set(jacobian.subarray(i * size, (i + 1) * size));
    row[size] = 0;
    addRow(system, row);
  }
  const factor = new Float64Array(size * size);
  for (let j = 0; j < size; j += 1) {
    factor.set(system.data.subarray(j * (size + 1), j * (size + 1) + size), j * size);
  }
  return factor;
}
