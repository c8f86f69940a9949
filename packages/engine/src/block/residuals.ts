import { rowSum } from "./row-sum";
import type { Workbench } from "./workbench";
import type { WhiteRows } from "./whitening";

/**
 * What the penalised sum of squares adds up at given linear unknowns: white residuals of the rows,
 * then of the priors. A row that isn't linear in mu, and whose noise is its own, has its residual
 * itself, not its tangent's.
 */
export function residualsAtValues(
  bench: Workbench,
  white: WhiteRows,
  values: Float64Array,
): Float64Array {
  const { layout, plan, prior, evaluated } = bench;
  const residuals = new Float64Array(layout.gaussian.length + prior.rows.length);
  for (let n = 0; n < white.count; n += 1) {
    let rest = white.right[n]!;
    for (let e = white.start[n]!; e < white.start[n + 1]!; e += 1) {
      rest -= white.value[e]! * values[white.position[e]!]!;
    }
    residuals[n] = rest;
  }
  if (layout.bent.length > 0) {
    const place = new Map(Array.from(plan.singles, (i, n) => [i, n]));
    for (const { row, residual } of layout.bent) {
      const n = place.get(row);
      if (n === undefined) continue;
      residuals[n] = residual(evaluated.base[row]! + rowSum(bench, row, values));
    }
  }
  prior.rows.forEach(({ position, value }, n) => {
    let rest = 0;
    for (let e = 0; e < position.length; e += 1) rest += value[e]! * values[position[e]!]!;
    residuals[white.count + n] = rest;
  });
  return residuals;
}

export function sumOfSquares(values: Float64Array): number {
  let sum = 0;
  for (const value of values) sum += value * value;
  return sum;
}
