import { squareFromPeak, type Peak } from "./cube-chart";
import type { CubeMode } from "./cube-integral";
import { climb, refineShape } from "./peak-shape";

/** Points an axis of the scan for peaks; with modes told, and without. */
const SCAN = { 2: { told: 12, untold: 40 }, 3: { told: 7, untold: 16 } } as const;
const MOST_PEAKS = 40;
/** A peak that holds less than e^-30 of the largest needs no chart of its own. */
const NEGLIGIBLE = 30;

export interface TopPeak extends Peak {
  /** The log density at the centre. */
  height: number;
}

/**
 * The peaks of a density on the square or cube: those told, and those that the highest points of
 * a regular scan lead to, each once. Where the scan sees nothing at all, the middle.
 *
 * @param f log density
 */
export function peaksOf(
  f: (u: Float64Array) => number,
  dimension: 2 | 3,
  modes: readonly CubeMode[],
): TopPeak[] {
  const count = SCAN[dimension][modes.length > 0 ? "told" : "untold"];
  const told = modes.map((mode) => refineShape(f, peakOf(mode)));
  const peaks = told.filter(({ height }) => height > -Infinity);
  const found: typeof peaks = [];
  for (const peak of peaks) if (!found.some((other) => same(peak, other))) found.push(peak);
  for (const start of topsOf(f, dimension, count)) {
    if (found.length >= MOST_PEAKS) break;
    if (found.some((peak) => squareFromPeak(peak, start, new Float64Array(dimension)) < 4))
      continue;
    const peak = climb(f, start, 0.5 / count);
    if (!found.some((other) => same(peak, other))) found.push(peak);
  }
  const best = Math.max(...found.map(lnMass));
  const kept = found.filter((peak) => lnMass(peak) > best - NEGLIGIBLE);
  return kept.length > 0 ? kept : [{ ...middleOf(dimension), height: 0 }];
}

function peakOf({ centre, scale }: CubeMode): Peak {
  const dimension = centre.length;
  if (scale.length === dimension * dimension) {
    return { centre, factor: scale.map((x, k) => (k % dimension <= k / dimension ? x : 0)) };
  }
  const factor = new Float64Array(dimension * dimension);
  scale.forEach((width, i) => (factor[i * (dimension + 1)] = width));
  return { centre, factor };
}

function middleOf(dimension: number): Peak {
  const half = new Float64Array(dimension).fill(0.5);
  return peakOf({ centre: half, scale: half });
}

function lnMass({ factor, height, centre }: TopPeak): number {
  let ln = height;
  for (let i = 0; i < centre.length; i += 1) ln += Math.log(factor[i * (centre.length + 1)]!);
  return ln;
}

function same(a: Peak, b: Peak): boolean {
  const z = new Float64Array(a.centre.length);
  return squareFromPeak(a, b.centre, z) < 0.3 && squareFromPeak(b, a.centre, z) < 0.3;
}

/** Points of the scan higher than all that surround them, the highest first. */
function topsOf(f: (u: Float64Array) => number, dimension: number, count: number): Float64Array[] {
  const size = count ** dimension;
  const place = (k: number) =>
    Float64Array.from({ length: dimension }, (_, i) => (digit(k, i, count) + 0.5) / count);
  const heights = Float64Array.from({ length: size }, (_, k) => f(place(k)));
  const tops: number[] = [];
  for (let k = 0; k < size; k += 1) {
    if (heights[k]! > -Infinity && isTop(heights, k, { dimension, count })) tops.push(k);
  }
  tops.sort((a, b) => heights[b]! - heights[a]! || a - b);
  return tops.map(place);
}

function isTop(
  heights: Float64Array,
  k: number,
  { dimension, count }: { dimension: number; count: number },
): boolean {
  for (let n = 0; n < 3 ** dimension; n += 1) {
    let neighbour = k;
    let outside = false;
    for (let i = 0; i < dimension; i += 1) {
      const move = digit(n, i, 3) - 1;
      const at = digit(k, i, count) + move;
      outside ||= at < 0 || at >= count;
      neighbour += move * count ** i;
    }
    if (outside || neighbour === k) continue;
    const other = heights[neighbour]!;
    // Of equals the first one is the top.
    if (other > heights[k]! || (other === heights[k]! && neighbour < k)) return false;
  }
  return true;
}

function digit(k: number, i: number, base: number): number {
  return Math.floor(k / base ** i) % base;
}
