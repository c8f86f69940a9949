import { cholesky, dot, forward, legendre20 } from "./dense";

/**
 * Plain computations that documents of every form are checked against: dense normal densities, and
 * integrals by composite Gauss-Legendre rules of 20 points over equal panels. Nothing of the engine
 * is used.
 */
const LN_2PI = Math.log(2 * Math.PI);

/** ln N(y; f, C). */
export function lnNormal(y: number[], f: number[], covariance: number[][]): number {
  const factor = cholesky(covariance);
  const residual = forward(
    factor,
    y.map((value, i) => value - f[i]!),
  );
  let ln = -(y.length * LN_2PI + dot(residual, residual)) / 2;
  factor.forEach((row, i) => (ln -= Math.log(row[i]!)));
  return ln;
}

/** r' C^-1 r. */
export function quadratic(residual: number[], covariance: number[][]): number {
  const white = forward(cholesky(covariance), residual);
  return dot(white, white);
}

/** ln of one normal density. */
export function lnDensity(x: number, sd = 1): number {
  return -((x / sd) ** 2) / 2 - Math.log(sd) - LN_2PI / 2;
}

/** ln of the integral of exp(f) from lower to upper. */
export function lnIntegral(
  f: (x: number) => number,
  lower: number,
  upper: number,
  panels = 120,
): number {
  const logs: number[] = [];
  const width = (upper - lower) / panels;
  for (let panel = 0; panel < panels; panel += 1) {
    for (const { x, w } of legendre20()) {
      logs.push(f(lower + width * (panel + (1 + x) / 2)) + Math.log((w * width) / 2));
    }
  }
  const most = Math.max(...logs);
  if (most === -Infinity) return most;
  let sum = 0;
  for (const log of logs) sum += Math.exp(log - most);
  return most + Math.log(sum);
}

/** The same in pieces, for a function with kinks: `edges` in any order, the least and greatest the ends. */
export function lnPieces(f: (x: number) => number, edges: number[], panels = 60): number {
  const sorted = [...edges].sort((a, b) => a - b);
  const logs = sorted.slice(1).map((to, i) => lnIntegral(f, sorted[i]!, to, panels));
  const most = Math.max(...logs);
  let sum = 0;
  for (const log of logs) sum += Math.exp(log - most);
  return most + Math.log(sum);
}

/** Covariance of noises of these sds, plus the sum of w w' over loadings. */
export function covarianceOf(sds: number[], ...loadings: number[][]): number[][] {
  return sds.map((sd, i) =>
    sds.map((_, j) => {
      let sum = i === j ? sd * sd : 0;
      for (const w of loadings) sum += w[i]! * w[j]!;
      return sum;
    }),
  );
}

/** Phi, by integrating the density over twelve standard deviations of the smaller tail. */
export function phi(z: number): number {
  const tail = Math.exp(lnIntegral((x) => lnDensity(x), Math.abs(z), Math.abs(z) + 12, 12));
  return z < 0 ? tail : 1 - tail;
}

/** Barlow's linear variance, clamped, as section 2 of the statistics has it. */
export function asymmetricLn(
  mu: number,
  { x, plus, minus }: { x: number; plus: number; minus: number },
): number {
  const linear = plus * minus + (plus - minus) * (mu - x);
  const least = Math.min(plus, minus) ** 2;
  const v = Math.min(Math.max(linear, least), Math.max(plus, minus) ** 2);
  return -((mu - x) ** 2) / (2 * v) + Math.log(2 / (plus + minus)) - LN_2PI / 2;
}
