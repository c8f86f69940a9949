import type { Table } from "./document";

/**
 * Linear interpolation in a table of one axis, bilinear in one of two.
 *
 *   one axis: v(x) = v_i + (v_(i+1) - v_i) (x - x_i) / (x_(i+1) - x_i), x_i <= x <= x_(i+1)
 *
 * @param table axes strictly increasing; `values` as long as its axis, or a row for each point
 *   of the first axis
 * @param at one coordinate for each axis, in the axes' own units
 * @returns NaN outside the table: an error where it is so everywhere, a likelihood of zero else
 */
export function interpolate(table: Pick<Table, "at" | "values">, at: number[]): number {
  const [first, second] = table.at;
  const row = cellOf(first, at[0]);
  if (row === null) return Number.NaN;
  if (second === undefined) {
    const values = table.values as number[];
    return between(values[row.low]!, values[row.low + 1]!, row.part);
  }
  const column = cellOf(second, at[1]);
  if (column === null) return Number.NaN;
  const rows = table.values as number[][];
  const along = (values: number[]) =>
    between(values[column.low]!, values[column.low + 1]!, column.part);
  return between(along(rows[row.low]!), along(rows[row.low + 1]!), row.part);
}

/** Exact at both ends, so that a table's own points come back unrounded. */
function between(from: number, to: number, part: number): number {
  return part === 1 ? to : from + (to - from) * part;
}

function cellOf(
  axis: number[] | undefined,
  x: number | undefined,
): { low: number; part: number } | null {
  if (axis === undefined || x === undefined) return null;
  let low = 0;
  let high = axis.length - 1;
  if (!(x >= axis[low]! && x <= axis[high]!)) return null;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (axis[middle]! <= x) low = middle;
    else high = middle;
  }
  return { low, part: (x - axis[low]!) / (axis[high]! - axis[low]!) };
}
