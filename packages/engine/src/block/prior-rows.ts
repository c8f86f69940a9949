import { choleskyFactor, whiten } from "@weighhouse/numerics/symmetric-cholesky";
import type { Layout } from "./layout";

/** An equation over some positions, in increasing order. */
export interface PivotRow {
  position: Int32Array;
  /** One longer: the right side last. */
  value: Float64Array;
}

/** The normal unknowns' priors as equations of unit variance. */
export interface PriorRows {
  rows: readonly PivotRow[];
  /** ln of the determinant of their correlations. */
  logDeterminant: number;
}

/**
 * N(0, 1) each: the row z = 0. Correlated ones, C = L L': the rows L^-1 z = 0.
 *
 * @returns the unknowns whose correlations aren't positive definite, where they aren't
 */
export function priorRowsOf(
  layout: Layout,
): { ok: true; prior: PriorRows } | { ok: false; unknowns: number[] } {
  const { linear, correlations } = layout.problem;
  const tied = [...new Set(correlations.flatMap(({ first, second }) => [first, second]))];
  tied.sort((a, b) => layout.place[a]! - layout.place[b]!);
  const size = tied.length;
  const matrix = new Float64Array(size * size);
  for (let i = 0; i < size; i += 1) matrix[i * size + i] = 1;
  for (const { first, second, value } of correlations) {
    const [a, b] = [tied.indexOf(first), tied.indexOf(second)];
    matrix[a * size + b] = value;
    matrix[b * size + a] = value;
  }
  const result = choleskyFactor(matrix, size);
  if (!result.ok) return { ok: false, unknowns: tied };
  const rows: PivotRow[] = [];
  linear.forEach(({ kind }, k) => {
    if (kind === "flat" || tied.includes(k)) return;
    rows.push({ position: Int32Array.of(layout.place[k]!), value: Float64Array.of(1, 0) });
  });
  const columns = tied.map((_, j) => {
    const column = new Float64Array(size);
    column[j] = 1;
    whiten(result.factor, column);
    return column;
  });
  let logDeterminant = 0;
  for (let i = 0; i < size; i += 1) {
    logDeterminant += 2 * Math.log(result.factor.lower[i * size + i]!);
    rows.push({
      position: Int32Array.from(tied.slice(0, i + 1), (k) => layout.place[k]!),
      value: Float64Array.from([...columns.slice(0, i + 1).map((column) => column[i]!), 0]),
    });
  }
  return { ok: true, prior: { rows, logDeterminant } };
}
