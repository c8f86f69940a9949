import type { PredictionPlace } from "./prediction-place";
import { legible } from "./reading";
import type { Reading } from "./reading";
import type { ConditionRange } from "./sampling";

/**
 * Between which values the conditions lie that an expression uses: the measurand's `where`, else
 * the table that a condition is looked up in, else what was measured.
 *
 * @returns null where one of them has no bounds: then it may be anything
 */
export function conditionRanges(
  reading: Reading,
  place: PredictionPlace,
  used: readonly string[],
): ConditionRange[] | null {
  const ranges: ConditionRange[] = [];
  for (const name of used) {
    const range = whereOf(place, name) ?? tableOf(place, name) ?? measuredOf(reading, place, name);
    if (range === null) return null;
    ranges.push([name, ...range]);
  }
  return ranges;
}

type Bounds = [lower: number, upper: number];

function whereOf({ measurand }: PredictionPlace, name: string): Bounds | null {
  const [lower, upper] = measurand?.where?.[name] ?? [];
  return typeof lower === "number" && typeof upper === "number" ? [lower, upper] : null;
}

function tableOf({ observable }: PredictionPlace, name: string): Bounds | null {
  for (const [, { key, time }] of legible(observable?.conditions)) {
    if (key !== name) continue;
    const values = (time?.table ?? []).map((row) => row?.[1]);
    return values.length > 0 && values.every((value) => value !== undefined)
      ? around(values)
      : null;
  }
  return null;
}

function measuredOf(
  reading: Reading,
  { prediction }: PredictionPlace,
  name: string,
): Bounds | null {
  const values: number[] = [];
  for (const one of reading.form.measurements ?? []) {
    if (one?.measurand !== prediction.measurand) continue;
    const value = one?.conditions?.[name];
    if (value !== undefined) values.push(value);
  }
  return values.length === 0 ? null : around(values);
}

function around(values: readonly number[]): Bounds {
  return values.reduce<Bounds>(
    ([lower, upper], value) => [Math.min(lower, value), Math.max(upper, value)],
    [Infinity, -Infinity],
  );
}
