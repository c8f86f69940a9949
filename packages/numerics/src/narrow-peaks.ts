import type { TopPeak } from "./cube-peaks";

/** A normal peak ends here, in standard deviations, at 1e-12 of its mass. */
const REACH = 7;
const MOST_NARROW = 2;

/** Planes to cut the cube at, and which peaks then have to do with a box between them. */
export interface Parting {
  breaks: number[][];
  peaksIn: (box: { lower: Float64Array; upper: Float64Array }) => TopPeak[];
}

/**
 * Parts a cube that has narrow peaks on top of broad ones: a box around each narrow peak, where it
 * alone has a chart, and what lies beside and between, where only the broad ones have.
 *
 * @returns null where no peak is narrow beside another, or more than two are
 */
export function partedAroundNarrow(
  peaks: readonly TopPeak[],
  breaks: readonly (readonly number[])[],
): Parting | null {
  const extents = peaks.map(extentOf);
  const narrow = peaks.map((_, k) =>
    extents.some((other) => extents[k]!.every((extent, i) => REACH * extent <= other[i]!)),
  );
  const count = narrow.filter(Boolean).length;
  if (count === 0 || count > MOST_NARROW) return null;
  const within = (k: number, at: Float64Array) =>
    at.every((x, i) => Math.abs(x - peaks[k]!.centre[i]!) <= REACH * extents[k]![i]!);
  return {
    breaks: Array.from(peaks[0]!.centre, (_, axis) => [
      ...(breaks[axis] ?? []),
      ...peaks.flatMap(({ centre }, k) =>
        narrow[k] ? [-1, 1].map((side) => centre[axis]! + side * REACH * extents[k]![axis]!) : [],
      ),
    ]),
    peaksIn: ({ lower, upper }) => {
      const middle = lower.map((x, i) => (x + upper[i]!) / 2);
      const inside = peaks.filter((_, k) => narrow[k] && within(k, middle));
      return inside.length > 0 ? inside : peaks.filter((_, k) => !narrow[k]);
    },
  };
}

/** The standard deviations along the axes. */
function extentOf({ centre, factor }: TopPeak): number[] {
  const dimension = centre.length;
  return Array.from(centre, (_, i) =>
    Math.hypot(...factor.subarray(i * dimension, (i + 1) * dimension)),
  );
}
