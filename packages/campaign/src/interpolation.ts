import type { Table } from "./document";

/**
 * Linear interpolation in a table of one axis, bilinear in one of two, or the slope of the cell.
 *
 *   one axis: v(x) = v_i + (v_(i+1) - v_i) (x - x_i) / (x_(i+1) - x_i), x_i <= x <= x_(i+1)
 *
 * @param table axes strictly increasing; `values` as long as its axis, or a row for each point
 *   of the first axis
 * @param slopes along which axes the slope is meant, in value's unit over the axis's; at a point
 *   of the table that of the cell above, at the last point that of the last cell
 * @param x, y one coordinate for each axis, in the axes' own units
 * @returns NaN outside the table: an error where it is so everywhere, a likelihood of zero else
 */
export function interpolate(
  table: Pick<Table, "at" | "values">,
  slopes: readonly boolean[],
  x: number,
  y = 0,
): number {
  const [first, second] = table.at as [number[], number[] | undefined];
  const i = cellOf(first, x);
  if (i < 0) return Number.NaN;
  if (second === undefined) {
    const values = table.values as number[];
    return along(first, i, x, slopes[0]!, values[i]!, values[i + 1]!);
  }
  const j = cellOf(second, y);
  if (j < 0) return Number.NaN;
  const rows = table.values as number[][];
  const [low, high] = [rows[i]!, rows[i + 1]!];
  const from = along(second, j, y, slopes[1]!, low[j]!, low[j + 1]!);
  const to = along(second, j, y, slopes[1]!, high[j]!, high[j + 1]!);
  return along(first, i, x, slopes[0]!, from, to);
}

/** Exact at both ends, so that a table's own points come back unrounded. */
// oxlint-disable-next-line max-params -- An object for each look-up would be made in hot loops.
function along(
  axis: number[],
  cell: number,
  x: number,
  slope: boolean,
  from: number,
  to: number,
): number {
  const start = axis[cell]!;
  const width = axis[cell + 1]! - start;
  if (slope) return (to - from) / width;
  const part = (x - start) / width;
  return part === 1 ? to : from + (to - from) * part;
}

/** The cell that holds x, by its lower point; -1 outside the axis. */
function cellOf(axis: number[], x: number): number {
  let low = 0;
  let high = axis.length - 1;
  if (!(x >= axis[low]! && x <= axis[high]!)) return -1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (axis[middle]! <= x) low = middle;
    else high = middle;
  }
  return low;
}
