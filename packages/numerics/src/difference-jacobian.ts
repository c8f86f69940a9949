const CUBE_ROOT_EPSILON = 2 ** (-52 / 3);

export interface DifferencedFunction {
  residuals(x: Float64Array, out: Float64Array): void;
}

export interface DifferencePoint {
  x: Float64Array;
  lower: Float64Array;
  upper: Float64Array;
  /** The largest |x| so far: next to 0 the size of x says nothing of what to step by. */
  largest: Float64Array;
  /** The residuals at x. */
  residuals: Float64Array;
  /** Receives the derivatives, row by row. */
  jacobian: Float64Array;
}

/**
 * Derivatives of residuals by central differences, (r(x + h) - r(x - h)) / 2h with
 * h = eps^(1/3) max(|x|, 1e-3 of the largest so far and of the bounds' width, 1 where all are 0); one-sided with the residuals
 * at x where one side is out of bounds or isn't finite.
 *
 * Accuracy: about 1e-10 relative, one-sided 1e-5.
 * Source: Nocedal & Wright, Numerical Optimization, 2nd ed., 8.1.
 */
export function differenceJacobian(f: DifferencedFunction, point: DifferencePoint): void {
  const { x, residuals, jacobian } = point;
  const size = x.length;
  const at = x.slice();
  const above = new Float64Array(residuals.length);
  const below = new Float64Array(residuals.length);
  for (let j = 0; j < size; j += 1) {
    const h = stepOf(point, j);
    const high = evaluate(f, at, { j, value: x[j]! + h, limit: point }, above) ? x[j]! + h : x[j]!;
    const low = evaluate(f, at, { j, value: x[j]! - h, limit: point }, below) ? x[j]! - h : x[j]!;
    const up = high === x[j] ? residuals : above;
    const down = low === x[j] ? residuals : below;
    at[j] = x[j]!;
    for (let i = 0; i < residuals.length; i += 1) {
      jacobian[i * size + j] = high === low ? NaN : (up[i]! - down[i]!) / (high - low);
    }
  }
}

function stepOf({ x, lower, upper, largest }: DifferencePoint, j: number): number {
  const width = upper[j]! - lower[j]!;
  const typical = Math.max(
    Math.abs(x[j]!),
    1e-3 * largest[j]!,
    width < Infinity ? 1e-3 * width : 0,
  );
  return CUBE_ROOT_EPSILON * (typical || 1);
}

interface Shift {
  j: number;
  value: number;
  limit: DifferencePoint;
}

function evaluate(
  f: DifferencedFunction,
  at: Float64Array,
  { j, value, limit }: Shift,
  out: Float64Array,
): boolean {
  if (value < limit.lower[j]! || value > limit.upper[j]!) return false;
  at[j] = value;
  f.residuals(at, out);
  return out.every(Number.isFinite);
}
