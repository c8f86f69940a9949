import { gaussKronrod } from "@weighhouse/numerics/gauss-kronrod";
import { LN_SQRT_2PI } from "@weighhouse/numerics/normal";
import { minimiseScalar } from "@weighhouse/numerics/minimise-scalar";
import type { Factor } from "./problem";

/** Beyond this many standard deviations a normal density is below 1e-18 of its height. */
const REACH = 9;

/**
 * A factor seen through a normal variance of the row's own,
 *
 *   ln int N(s; 0, extra) exp(f(mu + s)) ds,
 *
 * by adaptive quadrature, in pieces cut where the normal and the factor vary and at its kinks. In
 * chi-square s is one more thing that the minimum is taken over.
 *
 * @param extra variance > 0
 * Accuracy: 1e-11 in ln for factors smooth at their own scale.
 */
export function convolved(factor: Factor, extra: number): Factor {
  const sd = Math.sqrt(extra);
  return {
    ...factor,
    ln: (mu) => logConvolution(factor, sd, mu),
    scale: Math.hypot(factor.scale, sd),
    residual: factor.residual === null ? null : profiled(factor.residual, sd),
    box: null,
  };
}

function logConvolution(factor: Factor, sd: number, mu: number): number {
  const g = (s: number) => factor.ln(mu + sd * s) - (s * s) / 2;
  const cuts = new Set([-REACH, -3, -1, 0, 1, 3, REACH]);
  // Where the factor pulls hard, the product's mass lies well away from the normal's own.
  const pull = (factor.centre - mu) / sd;
  const width = factor.scale / sd;
  const far = Math.abs(pull) + 4 * width > REACH ? pull : 0;
  const reach = Math.max(REACH, Math.abs(far));
  for (const at of [-40, -12, -4, -1, 0, 1, 4, 12]) cuts.add(pull + at * width);
  for (const at of factor.breaks) cuts.add((at - mu) / sd);
  cuts.add(-reach).add(reach);
  const sorted = [...cuts].filter((at) => at >= -reach && at <= reach).sort((a, b) => a - b);
  const { peak, height } = highest(g, sorted);
  if (height === -Infinity) return -Infinity;
  const f = (s: number) => Math.exp(g(s) - height);
  const pieces = [...new Set([...sorted, peak])].sort((a, b) => a - b);
  let sum = 0;
  for (let i = 1; i < pieces.length; i += 1) {
    sum += gaussKronrod(f, pieces[i - 1]!, pieces[i]!, { relative: 1e-11, maximum: 60 }).value;
  }
  return height + Math.log(sum) - LN_SQRT_2PI;
}

/** The best of the places and of what lies between, then by golden sections about it. */
function highest(g: (s: number) => number, places: readonly number[]) {
  const looked = places.flatMap((at, i) => (i === 0 ? [at] : [(places[i - 1]! + at) / 2, at]));
  const values = looked.map(g);
  let best = 0;
  values.forEach((value, i) => (best = value > values[best]! ? i : best));
  let [peak, height] = [looked[best]!, values[best]!];
  let [a, b] = [looked[best - 1] ?? peak, looked[best + 1] ?? peak];
  for (let step = 0; step < 80 && b - a > 1e-12 * Math.abs(peak); step += 1) {
    const x = b - peak > peak - a ? peak + 0.381966 * (b - peak) : peak - 0.381966 * (peak - a);
    const value = g(x);
    if (value > height) {
      if (x > peak) a = peak;
      else b = peak;
      [peak, height] = [x, value];
    } else if (x > peak) b = x;
    else a = x;
  }
  return { peak, height };
}

/** The signed root of min over s of residual(mu + s)^2 + (s / sd)^2. */
function profiled(residual: (mu: number) => number, sd: number): (mu: number) => number {
  return (mu) => {
    const at = residual(mu);
    const square = (s: number) => residual(mu + sd * s) ** 2 + s * s;
    // The best s costs no more than s = 0 does.
    const reach = Math.abs(at);
    if (reach === 0) return 0;
    const least = minimiseScalar(square, -reach, reach);
    return Math.sign(at) * Math.sqrt(Math.min(least.value, at * at));
  };
}
