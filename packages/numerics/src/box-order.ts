import type { Box } from "./box";
import { LN_SQRT_2PI, logNormalInterval } from "./normal";
import { addRow, createSystem, type TriangularSystem } from "./triangular-system";

/**
 * The same box with its unknowns in another order, for sequential conditioning, which begins with
 * the last unknown: last comes the one least likely within its bounds, before it the one least
 * likely given the expected value of the last within its bounds, and so on. The integrand then
 * varies less over the lattice, by far so for strong correlations.
 *
 * Source: Genz & Bretz, Computation of Multivariate Normal and t Probabilities (2009), 4.1.3, after
 * Gibson, Glasbey & Elston (1994).
 */
export function tightestLast(
  system: TriangularSystem,
  box: Box,
): { system: TriangularSystem; box: Box } {
  const order = orderOf(system, box).reverse();
  const pick = (values: Float64Array) => Float64Array.from(order, (i) => values[i]!);
  const { size, data } = system;
  const sorted = createSystem(size);
  for (let i = 0; i < size; i += 1) {
    const row = new Float64Array(size + 1);
    order.forEach((from, to) => (row[to] = data[i * (size + 1) + from]!));
    row[size] = data[i * (size + 1) + size]!;
    addRow(sorted, row);
  }
  const { lower, upper, width } = box;
  return {
    system: sorted,
    box: {
      lower: pick(lower),
      upper: pick(upper),
      ...(width === undefined ? {} : { width: pick(width) }),
    },
  };
}

/** Cholesky decomposition of the covariance with the next variable chosen at each step. */
function orderOf(system: TriangularSystem, box: Box): number[] {
  const { size } = system;
  const { mean, rows } = spread(system);
  const order = Array.from({ length: size }, (_, i) => i);
  // Row by row: what is left of each variable's deviation, orthogonal to those chosen before.
  const expected = mean.slice();
  for (let step = 0; step < size; step += 1) {
    let best = step;
    let least = Infinity;
    for (let k = step; k < size; k += 1) {
      const i = order[k]!;
      const sd = Math.hypot(...rows[i]!);
      const ln = logInside(box, i, { mean: expected[i]!, sd });
      if (ln < least) [least, best] = [ln, k];
    }
    [order[step], order[best]] = [order[best]!, order[step]!];
    const chosen = order[step]!;
    const sd = Math.hypot(...rows[chosen]!);
    if (!(sd > 0)) continue;
    const axis = rows[chosen]!.map((x) => x / sd);
    const shift = expectedInside(box, chosen, { mean: expected[chosen]!, sd, ln: least });
    for (let k = step + 1; k < size; k += 1) {
      const row = rows[order[k]!]!;
      let along = 0;
      for (let c = 0; c < size; c += 1) along += row[c]! * axis[c]!;
      for (let c = 0; c < size; c += 1) row[c]! -= along * axis[c]!;
      expected[order[k]!]! += along * shift;
    }
  }
  return order;
}

/** Mean R^-1 z, and the rows of R^-1, whose products with one another are the covariance. */
function spread({ size, data }: TriangularSystem): { mean: Float64Array; rows: Float64Array[] } {
  const width = size + 1;
  const mean = new Float64Array(size);
  const rows = Array.from({ length: size }, () => new Float64Array(size));
  for (let i = size - 1; i >= 0; i -= 1) {
    const diagonal = data[i * width + i]!;
    mean[i] = data[i * width + size]!;
    rows[i]![i] = 1;
    for (let k = i + 1; k < size; k += 1) {
      const off = data[i * width + k]!;
      mean[i]! -= off * mean[k]!;
      for (let c = k; c < size; c += 1) rows[i]![c]! -= off * rows[k]![c]!;
    }
    mean[i]! /= diagonal;
    for (let c = i; c < size; c += 1) rows[i]![c]! /= diagonal;
  }
  return { mean, rows };
}

function logInside({ lower, upper }: Box, i: number, at: { mean: number; sd: number }): number {
  const a = (lower[i]! - at.mean) / at.sd;
  const b = (upper[i]! - at.mean) / at.sd;
  return b > a ? logNormalInterval(a, b) : -Infinity;
}

/** Mean of a standard normal cut to the bounds, (phi(a) - phi(b)) / (Phi(b) - Phi(a)). */
function expectedInside(
  { lower, upper }: Box,
  i: number,
  { mean, sd, ln }: { mean: number; sd: number; ln: number },
): number {
  const a = (lower[i]! - mean) / sd;
  const b = (upper[i]! - mean) / sd;
  if (ln === -Infinity) return Math.min(Math.max(0, a), b);
  const share = (x: number) => Math.exp(-(x * x) / 2 - LN_SQRT_2PI - ln);
  return Math.min(Math.max(share(a) - share(b), a), b);
}
