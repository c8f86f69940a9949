import type { CubeMode } from "./cube-integral";
import { findPeak } from "./log-concave-integral";

const MOST_PEAKS = 24;
/** A peak that holds less than e^-45 of the largest counts for nothing in double precision. */
const NEGLIGIBLE = 45;
/** Panels grow by this factor away from a peak. */
const GROWTH = 8;

/**
 * Where to cut [0, 1] before the adaptive rule starts: at each peak, and around it at distances
 * growing geometrically from its own width, so that a peak of 1e-8 costs a few panels only.
 *
 * @param f log density; its peaks are looked for from the modes given and from a scan of that
 *   many evenly spaced points
 * @returns cuts in (0, 1), any order
 */
export function cutsAroundPeaks(
  f: (x: number) => number,
  { modes, scan }: { modes: readonly CubeMode[]; scan: number },
): number[] {
  const peaks = [...peaksFromModes(f, modes), ...peaksFromScan(f, scan)];
  const best = Math.max(...peaks.map(({ height, width }) => height + Math.log(width)));
  const cuts: number[] = [];
  for (const { x, height, width } of peaks) {
    if (!(height + Math.log(width) > best - NEGLIGIBLE)) continue;
    cuts.push(x);
    for (let reach = GROWTH * width; reach < 1; reach *= GROWTH) cuts.push(x - reach, x + reach);
  }
  return cuts;
}

type Peak = ReturnType<typeof findPeak>;

function peaksFromModes(f: (x: number) => number, modes: readonly CubeMode[]): Peak[] {
  return modes.map(({ centre, scale }) =>
    findPeak(f, { lower: 0, upper: 1, start: centre[0]!, scale: Math.min(scale[0]!, 0.5) }),
  );
}

function peaksFromScan(f: (x: number) => number, count: number): Peak[] {
  const heights = Float64Array.from({ length: count }, (_, i) => f((i + 0.5) / count));
  const tops: number[] = [];
  for (let i = 0; i < count; i += 1) {
    const height = heights[i]!;
    if (height === -Infinity) continue;
    const left = i === 0 ? -Infinity : heights[i - 1]!;
    const right = i === count - 1 ? -Infinity : heights[i + 1]!;
    if (height > left && height >= right) tops.push(i);
  }
  tops.sort((a, b) => heights[b]! - heights[a]! || a - b);
  return tops.slice(0, MOST_PEAKS).map((i) =>
    findPeak(f, {
      lower: Math.max(0, (i - 0.5) / count),
      upper: Math.min(1, (i + 1.5) / count),
      start: (i + 0.5) / count,
      scale: 0.5 / count,
    }),
  );
}
