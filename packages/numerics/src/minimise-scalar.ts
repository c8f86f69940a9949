/** Where a function of one variable is smallest, and how small. */
export interface ScalarMinimum {
  x: number;
  value: number;
}

/**
 * A local minimum of f on [lower, upper] by golden section and parabolas; of a function that falls
 * and then rises, the minimum.
 *
 * @param f its values that aren't numbers count as Infinity; where all that is seen at first is that, no
 *   minimum is found
 * @param tolerance wanted width of the bracket relative to |x|, not below 1.5e-8: around a minimum
 *   the values of f tell no more
 * Source: R. P. Brent, Algorithms for Minimization without Derivatives (1973), ch. 5 (localmin).
 */
export function minimiseScalar(
  f: (x: number) => number,
  lower: number,
  upper: number,
  tolerance = 1.5e-8,
): ScalarMinimum {
  const golden = (3 - Math.sqrt(5)) / 2;
  const at = (x: number): number => {
    const value = f(x);
    return Number.isNaN(value) ? Infinity : value;
  };
  const absolute = 1e-12 * (upper - lower);
  let a = lower;
  let b = upper;
  let x = a + golden * (b - a);
  let w = x;
  let v = x;
  let fx = at(x);
  let fw = fx;
  let fv = fx;
  let move = 0;
  let before = 0;
  for (let step = 0; step < 500; step += 1) {
    const middle = (a + b) / 2;
    const near = tolerance * Math.abs(x) + absolute;
    if (Math.abs(x - middle) <= 2 * near - (b - a) / 2) break;
    let r = (x - w) * (fx - fv);
    let q = (x - v) * (fx - fw);
    let p = (x - v) * q - (x - w) * r;
    q = 2 * (q - r);
    if (q > 0) p = -p;
    else q = -q;
    r = before;
    before = move;
    const parabola =
      Math.abs(p) < Math.abs((q * r) / 2) && p > q * (a - x) && p < q * (b - x) && r !== 0;
    if (parabola) {
      move = p / q;
      if (x + move - a < 2 * near || b - x - move < 2 * near) move = x < middle ? near : -near;
    } else {
      before = (x < middle ? b : a) - x;
      move = golden * before;
    }
    const u = x + (Math.abs(move) >= near ? move : Math.sign(move) * near);
    const fu = at(u);
    if (fu <= fx) {
      if (u < x) b = x;
      else a = x;
      [v, fv, w, fw, x, fx] = [w, fw, x, fx, u, fu];
    } else {
      if (u < x) a = u;
      else b = u;
      if (fu <= fw || w === x) [v, fv, w, fw] = [w, fw, u, fu];
      else if (fu <= fv || v === x || v === w) [v, fv] = [u, fu];
    }
  }
  return { x, value: fx };
}
