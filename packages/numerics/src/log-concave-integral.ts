import { gaussKronrod } from "./gauss-kronrod";

/** Below the peak by this much in ln, e^-50 = 2e-22: nothing there counts in double precision. */
const NEGLIGIBLE = 50;

/**
 * ln of the integral of exp(g) over an interval, for a concave g (a log-concave integrand).
 *
 * The peak is bracketed uphill from `start`, narrowed by golden sections, and the integral taken
 * on both sides of it as far as exp(g) counts; so neither a peak of 1e-8 of the interval's width
 * nor one at its end is missed.
 *
 * @param g concave; -Infinity allowed away from `start`
 * @param range lower < upper, infinities allowed; `start` inside; `scale` > 0, a guess of the width
 * @returns natural log, and the bound of its error that the quadrature itself gives
 * Accuracy: 1e-10 in the log for g that is smooth at the scale of its peak.
 */
export function logConcaveIntegral(
  g: (x: number) => number,
  range: { lower: number; upper: number; start: number; scale: number },
): { ln: number; error: number } {
  const { x: peak, height, width } = findPeak(g, range);
  if (height === -Infinity) return { ln: -Infinity, error: 0 };
  const f = (x: number) => Math.exp(g(x) - height);
  const left = findEdge(g, height, { from: peak, step: -width, end: range.lower });
  const right = findEdge(g, height, { from: peak, step: width, end: range.upper });
  const options = { relative: 1e-9 };
  const below = left < peak ? gaussKronrod(f, left, peak, options) : { value: 0, error: 0 };
  const above = peak < right ? gaussKronrod(f, peak, right, options) : { value: 0, error: 0 };
  const value = below.value + above.value;
  return { ln: height + Math.log(value), error: (below.error + above.error) / value };
}

/**
 * The peak of g that lies uphill from `start`: bracketed by doubling steps, narrowed by golden
 * sections until g falls by no more than half a nat to either side. For a concave g the only one.
 *
 * @returns where, g there, and the larger of the distances to the two sides
 */
export function findPeak(
  g: (x: number) => number,
  range: { lower: number; upper: number; start: number; scale: number },
): { x: number; height: number; width: number } {
  const { lower, upper } = range;
  let x = Math.min(Math.max(range.start, lower), upper);
  let height = g(x);
  let step = range.scale;
  let left = Math.max(x - step, lower);
  let right = Math.min(x + step, upper);
  let atLeft = g(left);
  let atRight = g(right);
  for (let tries = 0; tries < 2000 && right > x && atRight > height; tries += 1) {
    [left, atLeft, x, height] = [x, height, right, atRight];
    step *= 2;
    right = Math.min(x + step, upper);
    atRight = g(right);
  }
  for (let tries = 0; tries < 2000 && left < x && atLeft > height; tries += 1) {
    [right, atRight, x, height] = [x, height, left, atLeft];
    step *= 2;
    left = Math.max(x - step, lower);
    atLeft = g(left);
  }
  // Concave, so that once both ends are within a little of the height, so is the peak.
  for (
    let tries = 0;
    tries < 200 && Math.max(height - atLeft, height - atRight) > 0.5;
    tries += 1
  ) {
    const toRight = right - x > x - left;
    const probe = toRight ? x + 0.381966 * (right - x) : x - 0.381966 * (x - left);
    if (probe === x || probe === left || probe === right) break;
    const value = g(probe);
    if (value > height) {
      if (toRight) [left, atLeft] = [x, height];
      else [right, atRight] = [x, height];
      [x, height] = [probe, value];
    } else if (toRight) [right, atRight] = [probe, value];
    else [left, atLeft] = [probe, value];
  }
  const width = Math.max(right - x, x - left);
  return { x, height, width: width > 0 ? width : range.scale };
}

/** How far from the peak exp(g) counts: doubling steps outwards, then halving back. */
function findEdge(
  g: (x: number) => number,
  height: number,
  { from, step, end }: { from: number; step: number; end: number },
): number {
  const clamp = (x: number) => (step < 0 ? Math.max(x, end) : Math.min(x, end));
  let inside = from;
  let reach = step;
  let outside = clamp(from + reach);
  while (outside !== end && height - g(outside) < NEGLIGIBLE) {
    inside = outside;
    reach *= 2;
    outside = clamp(from + reach);
  }
  if (height - g(outside) < NEGLIGIBLE) return outside;
  for (let tries = 0; tries < 60; tries += 1) {
    const middle = (inside + outside) / 2;
    const drop = height - g(middle);
    if (drop >= NEGLIGIBLE && drop <= 2 * NEGLIGIBLE) return middle;
    if (drop < NEGLIGIBLE) inside = middle;
    else outside = middle;
  }
  return outside;
}
