import type { Box, LogIntegral } from "./box";
import { logConcaveIntegral } from "./log-concave-integral";
import { latticeBoxIntegral } from "./box-lattice";
import { logIntervalIntegral } from "./interval-integral";
import type { TriangularSystem } from "./triangular-system";

/**
 * ln of the integral of a Gaussian over a box,
 *
 *   ln int_lower^upper exp(-|R t - z|^2 / 2) dt
 *
 * One dimension: the closed form. Two and three: the last unknowns by nested adaptive quadrature,
 * the first one in closed form. More: Genz's sequential conditioning on a fixed lattice.
 *
 * @param system n unknowns, every diagonal not 0; `rss` isn't looked at
 * @param box n lower and n upper bounds, lower < upper
 * Accuracy: 1-D 1e-12 relative, 2-D and 3-D 1e-9 in ln, more: within three stated errors.
 * Source: Genz, J. Comput. Graph. Stat. 1 (1992) 141. Reference values: box-integral.test.ts.
 */
export function logBoxIntegral(system: TriangularSystem, box: Box): LogIntegral {
  if (system.size > 3) return latticeBoxIntegral(system, box);
  return nested(system, box, system.size - 1, new Float64Array(system.size));
}

function nested(system: TriangularSystem, box: Box, i: number, t: Float64Array): LogIntegral {
  const width = system.size + 1;
  const diagonal = system.data[i * width + i]!;
  let shift = system.data[i * width + system.size]!;
  for (let k = i + 1; k < system.size; k += 1) shift -= system.data[i * width + k]! * t[k]!;
  const lower = box.lower[i]!;
  const upper = box.upper[i]!;
  const range = { lower, upper, width: box.width?.[i] };
  if (i === 0) return { ln: logIntervalIntegral(diagonal, shift, range), error: 0 };
  let innerError = 0;
  const g = (x: number) => {
    t[i] = x;
    const inner = nested(system, box, i - 1, t);
    innerError = Math.max(innerError, inner.error);
    const residual = diagonal * x - shift;
    return inner.ln - (residual * residual) / 2;
  };
  const scale = Math.min(1 / Math.abs(diagonal), (upper - lower) / 4);
  const outer = logConcaveIntegral(g, { lower, upper, start: shift / diagonal, scale });
  return { ln: outer.ln, error: outer.error + innerError };
}

/**
 * The same integral where few Gaussian unknowns couple the boxed ones: given the couplers, the
 * boxed unknowns are independent and each is closed-form, so what is left is an integral over the
 * couplers alone, one or two dimensions whatever the number of boxes.
 *
 * @param system boxed unknowns first (their part of R diagonal), then one or two couplers, unbounded
 * @param box bounds of the boxed unknowns; infinite ones allowed
 * Accuracy: 1e-9 in ln.
 */
export function logCoupledBoxIntegral(system: TriangularSystem, box: Box): LogIntegral {
  const boxed = box.lower.length;
  const { size, data } = system;
  const width = size + 1;
  const couplers = new Float64Array(size);
  const at = (i: number): LogIntegral => {
    if (i < boxed) return { ln: product(system, box, couplers), error: 0 };
    const diagonal = data[i * width + i]!;
    let shift = data[i * width + size]!;
    for (let k = i + 1; k < size; k += 1) shift -= data[i * width + k]! * couplers[k]!;
    let innerError = 0;
    const g = (x: number) => {
      couplers[i] = x;
      const inner = at(i - 1);
      innerError = Math.max(innerError, inner.error);
      const residual = diagonal * x - shift;
      return inner.ln - (residual * residual) / 2;
    };
    const range = { lower: -Infinity, upper: Infinity };
    const start = shift / diagonal;
    const outer = logConcaveIntegral(g, { ...range, start, scale: 1 / Math.abs(diagonal) });
    return { ln: outer.ln, error: outer.error + innerError };
  };
  return at(size - 1);
}

function product(system: TriangularSystem, box: Box, couplers: Float64Array): number {
  const { size, data } = system;
  const boxed = box.lower.length;
  let ln = 0;
  for (let i = 0; i < boxed; i += 1) {
    const row = i * (size + 1);
    let shift = data[row + size]!;
    for (let k = boxed; k < size; k += 1) shift -= data[row + k]! * couplers[k]!;
    const range = { lower: box.lower[i]!, upper: box.upper[i]!, width: box.width?.[i] };
    ln += logIntervalIntegral(data[row + i]!, shift, range);
  }
  return ln;
}
