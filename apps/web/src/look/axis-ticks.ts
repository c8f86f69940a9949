import { formatDate } from "@weighhouse/figures/times";

/** Round numbers in [low, high], 1, 2 or 5 times a power of ten apart, about `count` of them. */
export function linearTicks(low: number, high: number, count = 6): number[] {
  if (!(high > low)) return [low];
  const rough = (high - low) / count;
  const power = 10 ** Math.floor(Math.log10(rough));
  const step = power * ([1, 2, 5].find((factor) => factor * power >= rough) ?? 10);
  const ticks: number[] = [];
  for (let index = Math.ceil(low / step); index * step <= high; index += 1) {
    // Rounded to the step's own decimals: 3 * 0.1 is not 0.3.
    ticks.push(Number((index * step).toPrecision(12)));
  }
  return ticks;
}

/** Ticks of a logarithmic axis: powers of ten, with 2 and 5 between where there are few. */
export function logTicks(low: number, high: number): number[] {
  const decades = Math.log10(high / low);
  if (decades < 0.5) return linearTicks(low, high).filter((tick) => tick > 0);
  const every = Math.max(1, Math.ceil(decades / 8));
  const factors = decades > 3 ? [1] : [1, 2, 5];
  const ticks: number[] = [];
  for (let power = Math.floor(Math.log10(low)); power <= Math.log10(high); power += every) {
    ticks.push(...factors.map((factor) => Number(`${factor}e${power}`)));
  }
  return ticks.filter((tick) => tick >= low && tick <= high);
}

const HOUR = 3_600_000;
const DAY = 24 * HOUR;
const steps = [
  60_000,
  300_000,
  900_000,
  HOUR,
  3 * HOUR,
  6 * HOUR,
  12 * HOUR,
  ...[1, 2, 7, 14].map((days) => days * DAY),
];
/** In months: beyond two weeks ticks stand at the first of a month. */
const monthSteps = [1, 2, 3, 6, 12, 24, 60, 120, 240, 600, 1200];

/** Times in [from, to], milliseconds, a round step apart in UTC, with how to write them. */
export function timeTicks(
  from: number,
  to: number,
  count = 5,
): { ticks: number[]; text: (at: number) => string } {
  const step = steps.find((each) => (to - from) / each <= count);
  if (step === undefined) return { ticks: monthTicks(from, to, count), text: dateText };
  const ticks: number[] = [];
  for (let at = Math.ceil(from / step) * step; at <= to; at += step) ticks.push(at);
  return { ticks, text: (at) => timeText(at, step) };
}

function monthTicks(from: number, to: number, count: number): number[] {
  const months = (to - from) / (30.44 * DAY);
  const step = monthSteps.find((each) => months / each <= count) ?? Math.ceil(months / count);
  const first = new Date(from);
  const ticks: number[] = [];
  const start = first.getUTCFullYear() * 12 + first.getUTCMonth();
  for (let month = Math.ceil(start / step) * step; ; month += step) {
    const at = new Date(0).setUTCFullYear(Math.floor(month / 12), month % 12, 1);
    if (at > to) return ticks;
    if (at >= from) ticks.push(at);
  }
}

function dateText(at: number): string {
  return formatDate(new Date(at).toISOString());
}

function timeText(at: number, step: number): string {
  const iso = new Date(at).toISOString();
  const date = formatDate(iso);
  return step < DAY ? `${date.replace(/ \d+$/, "")}, ${iso.slice(11, 16)}` : date;
}
