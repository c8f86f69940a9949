/**
 * ln(sum of exp(x_i)) without overflow or underflow: the largest is taken out first.
 *
 * @param values any; -Infinity adds nothing
 * @returns -Infinity for an empty list
 */
export function logSumExp(values: readonly number[]): number {
  let largest = -Infinity;
  for (const value of values) if (value > largest) largest = value;
  if (largest === -Infinity) return -Infinity;
  let sum = 0;
  for (const value of values) sum += Math.exp(value - largest);
  return largest + Math.log(sum);
}
