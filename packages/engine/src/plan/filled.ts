/** Values that lie this much below the largest say nothing, however rough they are. */
const NEGLIGIBLE = 40;
/** An interpolation this good at an interval's middle is a sixteenth of that at its quarters. */
const GOOD = 2e-3;
const FIRST_STRIDE = 8;

/**
 * Values of a smooth function at 0 .. count - 1, of which as few are asked for as will do: every
 * eighth, then middles, until cubics through the neighbours have foretold them to 2e-3; from there on
 * cubics stand for them.
 *
 * Accuracy: 1e-3 where the function bends no faster than its middles show.
 */
export function filled(count: number, valueAt: (place: number) => number): Float64Array {
  const values = new Float64Array(count).fill(Number.NaN);
  const last = count - 1;
  if (last < 2 * FIRST_STRIDE) return values.map((_, i) => valueAt(i));
  let stride = FIRST_STRIDE;
  for (let i = 0; i <= last; i += stride) values[i] = valueAt(i);
  const known = last - (last % stride);
  for (let i = known + 1; i <= last; i += 1) values[i] = valueAt(i);
  let most = values.reduce((so, value) => (value > so ? value : so), -Infinity);
  /** By the place where an interval begins: whether its middle was foretold. */
  let good = new Set<number>();
  for (; stride > 1; stride /= 2) {
    const half = stride / 2;
    const next = new Set<number>();
    for (let i = 0; i + stride <= known; i += stride) {
      const middle = i + half;
      const foretold = cubic(values, i, stride, known);
      const low = values[i]! < most - NEGLIGIBLE && values[i + stride]! < most - NEGLIGIBLE;
      const trusted = good.has(i) && Number.isFinite(foretold);
      values[middle] = trusted || (low && Number.isFinite(foretold)) ? foretold : valueAt(middle);
      most = Math.max(most, values[middle]!);
      if (trusted || Math.abs(values[middle]! - foretold) <= GOOD) {
        next.add(i);
        next.add(middle);
      }
    }
    good = next;
  }
  return values;
}

/** At the middle of [i, i + stride], through the four points about it; NaN at the ends. */
function cubic(values: Float64Array, i: number, stride: number, known: number): number {
  if (i < stride || i + 2 * stride > known) return Number.NaN;
  const [a, b] = [values[i - stride]!, values[i]!];
  const [c, d] = [values[i + stride]!, values[i + 2 * stride]!];
  return (9 * (b + c) - a - d) / 16;
}
