/**
 * Legendre polynomials P_n of a condition's place in its range, unnormalised:
 *
 *   (n + 1) P_(n+1) = (2n + 1) x P_n - n P_(n-1),   P_0 = 1, P_1 = x,   x in [-1, 1]
 *
 * @param into P_0 .. P_(length - 1)
 */
export function legendre(
  { lower, upper }: { lower: number; upper: number },
  at: number,
  into: Float64Array,
): void {
  const x = (2 * (at - lower)) / (upper - lower) - 1;
  let [before, now] = [0, 1];
  for (let n = 0; n < into.length; n += 1) {
    into[n] = now;
    [before, now] = [now, ((2 * n + 1) * x * now - n * before) / (n + 1)];
  }
}
