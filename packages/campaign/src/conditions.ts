import type { Condition } from "./document";
import { compareInstants, secondsBetween } from "./instants";

/** The units in which a condition may count time since its epoch, in seconds. */
export const timeUnits: Record<string, number> = {
  d: 86_400,
  day: 86_400,
  h: 3600,
  hour: 3600,
  s: 1,
};

/**
 * A condition's value at an instant: the time since its epoch in its unit, or its table
 * interpolated linearly.
 *
 * @returns null for a condition that isn't computed from time, and outside its table
 */
export function conditionFromTime(
  condition: Pick<Condition, "unit" | "time">,
  at: string,
): number | null {
  if (condition.time === null) return null;
  const { epoch, table } = condition.time;
  if (epoch !== null) {
    return secondsBetween(epoch, at) / (timeUnits[condition.unit ?? ""] ?? Number.NaN);
  }
  return table === null ? null : interpolated(table, at);
}

function interpolated(table: [string, number][], at: string): number | null {
  let low = 0;
  let high = table.length - 1;
  if (compareInstants(at, table[low]![0]) < 0 || compareInstants(at, table[high]![0]) > 0) {
    return null;
  }
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (compareInstants(table[middle]![0], at) <= 0) low = middle;
    else high = middle;
  }
  const [start, from] = table[low]!;
  const [end, to] = table[high]!;
  const part = secondsBetween(start, at) / secondsBetween(start, end);
  return from + (to - from) * part;
}
