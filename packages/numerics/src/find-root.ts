import { NumericsError } from "./numerics-error";

/**
 * A zero of f between two points at which it has opposite signs, by bisection, secant and inverse
 * quadratic interpolation.
 *
 * @param f continuous on [lower, upper]
 * @param tolerance wanted absolute accuracy of x, beside 4 eps |x|
 * @throws {NumericsError} `out-of-domain` where f has one sign at both ends, or is no number there
 * Source: R. P. Brent, Algorithms for Minimization without Derivatives (1973), ch. 4 (zero).
 */
export function findRoot(
  f: (x: number) => number,
  lower: number,
  upper: number,
  tolerance = 0,
): number {
  let a = lower;
  let b = upper;
  let fa = f(a);
  let fb = f(b);
  if (fa === 0) return a;
  if (fb === 0) return b;
  if (!(fa < 0 !== fb < 0) || Number.isNaN(fa) || Number.isNaN(fb)) {
    throw new NumericsError(
      "out-of-domain",
      `a root needs a change of sign; found ${fa} at ${lower} and ${fb} at ${upper}`,
    );
  }
  let c = a;
  let fc = fa;
  let move = b - a;
  let before = move;
  for (let step = 0; step < 1000; step += 1) {
    if (Math.abs(fc) < Math.abs(fb)) [a, b, c, fa, fb, fc] = [b, c, b, fb, fc, fb];
    const near = 2 * 2 ** -52 * Math.abs(b) + tolerance / 2;
    const half = (c - b) / 2;
    if (Math.abs(half) <= near || fb === 0) break;
    const guess = Math.abs(before) >= near && Math.abs(fa) > Math.abs(fb);
    const inner = guess ? interpolate({ a, b, c, fa, fb, fc }, half) : NaN;
    if (
      Math.abs(inner) < 1.5 * Math.abs(half) - near / 2 &&
      inner * half > 0 &&
      Math.abs(inner) < Math.abs(before / 2)
    ) {
      before = move;
      move = inner;
    } else {
      move = half;
      before = half;
    }
    a = b;
    fa = fb;
    b += Math.abs(move) > near ? move : Math.sign(half) * Math.max(near, Number.MIN_VALUE);
    fb = f(b);
    if (fb > 0 === fc > 0) {
      c = a;
      fc = fa;
      before = b - a;
      move = before;
    }
  }
  return b;
}

interface Bracket {
  a: number;
  b: number;
  c: number;
  fa: number;
  fb: number;
  fc: number;
}

/** The step from b: of the secant, or of the inverse parabola through three points. */
function interpolate({ a, b, c, fa, fb, fc }: Bracket, half: number): number {
  const s = fb / fa;
  if (a === c) return (2 * half * s) / (s - 1);
  const q = fa / fc;
  const r = fb / fc;
  const p = s * (2 * half * q * (q - r) - (b - a) * (r - 1));
  return -p / ((q - 1) * (r - 1) * (s - 1));
}
