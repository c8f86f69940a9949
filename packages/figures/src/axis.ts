import { formatNumber } from "./numbers";

export type Graduation = { value: number; text: string };

/** Maps a value to a coordinate. */
export type Axis = { at(value: number): number; graduations: Graduation[] };

export type AxisRange = { from: number; to: number; log?: boolean };

/**
 * An axis whose graduations are at 1, 2 or 5 times a power of ten.
 *
 * @param range finite, from < to; both above 0 on a logarithmic axis
 * @param span the coordinates of its ends; the second may be the smaller
 * @param most about how many graduations
 */
export function axis(range: AxisRange, span: [number, number], most = 6): Axis {
  const place = (value: number) => (range.log ? Math.log10(value) : value);
  const [low, high] = [place(range.from), place(range.to)];
  const [start, end] = span;
  const at = (value: number) => start + ((place(value) - low) / (high - low)) * (end - start);
  const values = range.log && high - low > 0.7 ? logSteps(low, high, most) : evenSteps(range, most);
  return { at, graduations: values.map((value) => ({ value, text: formatNumber(value, 12) })) };
}

/** A range that holds all values with a little room, and has a width even if they are one. */
export function rangeOf(values: readonly number[], log = false): AxisRange {
  const usable = values.filter((value) => Number.isFinite(value) && (!log || value > 0));
  if (usable.length === 0) return log ? { from: 1, to: 10, log } : { from: 0, to: 1, log };
  const low = usable.reduce((least, value) => Math.min(least, value));
  const high = usable.reduce((most, value) => Math.max(most, value));
  if (log) {
    const room = Math.max(0.06 * Math.log10(high / low), 0.02);
    return { from: low / 10 ** room, to: high * 10 ** room, log };
  }
  const room = 0.06 * (high - low) || Math.abs(high) * 1e-3 || 1;
  return { from: low - room, to: high + room, log };
}

function evenSteps({ from, to }: AxisRange, most: number): number[] {
  const step = niceStep((to - from) / most);
  const first = Math.ceil(from / step);
  const count = Math.floor(to / step) - first + 1;
  // Multiplied and rounded to the step's own digits: adding up would leave 0.30000000000000004.
  const digits = Math.max(0, -Math.floor(Math.log10(step)));
  return Array.from({ length: Math.max(0, count) }, (_, index) =>
    digits > 15 ? (first + index) * step : Number(((first + index) * step).toFixed(digits)),
  );
}

function niceStep(rough: number): number {
  const power = 10 ** Math.floor(Math.log10(rough));
  const factor = [1, 2, 5, 10].find((candidate) => candidate * power >= rough) ?? 10;
  return factor * power;
}

function logSteps(low: number, high: number, most: number): number[] {
  const decades = high - low;
  const factors = decades > most / 2 ? [1] : decades > most / 3 ? [1, 3] : [1, 2, 5];
  const every = Math.max(1, Math.ceil(decades / most));
  const values: number[] = [];
  for (let decade = Math.floor(low); decade <= high; decade++) {
    if (decade % every !== 0) continue;
    for (const factor of factors) {
      const value = Number(`${factor}e${decade}`);
      if (Math.log10(value) >= low && Math.log10(value) <= high) values.push(value);
    }
  }
  return values;
}
