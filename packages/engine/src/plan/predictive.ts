import { LN_SQRT_2PI } from "@weighhouse/numerics/normal";
import { filled } from "./filled";

/**
 * A hypothesis's distribution of a reading, given all data, as a mixture of normals in scoring
 * space. With noise sd it is sum of weight N(mean, variance + sd^2 - floor): `floor` is the variance
 * of noise that the components hold already.
 */
export interface Predictive {
  components: { weight: number; mean: number; variance: number }[];
  floor: number;
  /** Without the reading's own noise. */
  mean: number;
  sd: number;
}

/** Components farther than this many of their sd add nothing: e^-72. */
const FAR = 12;

/** ln of the density of a reading with noise sd; below sqrt(floor) as smooth as that. */
export function logDensity({ components, floor }: Predictive, y: number, sd: number): number {
  const own = Math.max(sd * sd - floor, 0);
  let most = -Infinity;
  let sum = 0;
  for (let i = firstNear(components, y, own); i < components.length; i += 1) {
    const { weight, mean, variance } = components[i]!;
    const total = variance + own;
    const z = y - mean;
    const log = Math.log(weight / Math.sqrt(total)) - (z * z) / (2 * total);
    if (log <= most) {
      sum += Math.exp(log - most);
      if (z < 0 && z * z > FAR * FAR * total) break;
    } else {
      sum = sum * Math.exp(most - log) + 1;
      most = log;
    }
  }
  return most + Math.log(sum) - LN_SQRT_2PI;
}

/** Components are in increasing order of their means, and of one variance where they are many. */
function firstNear(components: Predictive["components"], y: number, own: number): number {
  if (components.length < 8) return 0;
  const least = y - FAR * Math.sqrt(components[0]!.variance + own);
  let [low, high] = [0, components.length - 1];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (components[middle]!.mean < least) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** ln p(y) of the reading under a hypothesis, with a noise of its own; null: impossible. */
export type LogPredictive = (y: number, sd: number, hypothesis: string) => number | null;

/** Where a reading might fall, in scoring space. */
export interface Range {
  middle: number;
  scale: number;
  /** Of a circle: readings are told apart within one period. */
  period?: number;
}

/** Of a normal's ln density, how far rounding of ln evidences may move it. */
const NORMAL_TO = 1e-6;

/**
 * Reads a hypothesis's predictive off the ratio of evidences with and without a reading. A normal
 * one, whose log is a parabola, is known from three readings and checked at two more; any other is
 * tabulated.
 *
 * @param sd the reading's own noise
 * Accuracy: normal ones 1e-6 of their sd; tabulated ones 1e-3.
 */
export function predictivesOf(
  logPredictive: LogPredictive,
  hypotheses: readonly string[],
  { sd, range }: { sd: number; range: Range },
): Map<string, Predictive> {
  const predictives = new Map<string, Predictive>();
  for (const key of hypotheses) {
    const ln = remembered((y, own) => logPredictive(y, own, key) ?? -Infinity);
    const normal =
      range.period === undefined ? normalPredictive((y) => ln(y, sd), { sd, range }) : null;
    const found = normal ?? tabulated(ln, { sd, range });
    if (found !== null) predictives.set(key, found);
  }
  return predictives;
}

/** The same reading is never scored twice. */
function remembered(ln: (y: number, sd: number) => number): (y: number, sd: number) => number {
  const known = new Map<string, number>();
  return (y, sd) => {
    const key = `${y} ${sd}`;
    const there = known.get(key);
    if (there !== undefined) return there;
    const value = ln(y, sd);
    known.set(key, value);
    return value;
  };
}

type Parabola = { mean: number; variance: number; peak: number };

function normalPredictive(
  ln: (y: number) => number,
  { sd, range }: { sd: number; range: Range },
): Predictive | null {
  let { middle, scale } = range;
  let found: Parabola | null = null;
  // The second time from where the first one found the peak, for the digits.
  for (let round = 0; round < 3; round += 1) {
    found = parabolaThrough(ln, middle, scale);
    if (found === null) return null;
    [middle, scale] = [found.mean, Math.sqrt(found.variance)];
  }
  const { variance, peak } = found!;
  // Rounding about 0 is no prediction.
  const mean = Math.abs(found!.mean) < 1e-9 * sd ? 0 : found!.mean;
  const spread = Math.sqrt(variance);
  const expected = (z: number) => -LN_SQRT_2PI - Math.log(spread) - (z * z) / 2;
  for (const z of [0, -3, 2]) {
    const there = z === 0 ? peak : ln(mean + z * spread);
    if (!(Math.abs(there - expected(z)) <= NORMAL_TO)) return null;
  }
  const own = variance - sd * sd;
  const latent = own > 1e-9 * sd * sd ? own : 0;
  return {
    components: [{ weight: 1, mean, variance: latent }],
    floor: 0,
    mean,
    sd: Math.sqrt(latent),
  };
}

function parabolaThrough(
  ln: (y: number) => number,
  middle: number,
  scale: number,
): Parabola | null {
  const [left, centre, right] = [ln(middle - scale), ln(middle), ln(middle + scale)];
  const curvature = (left - centre + (right - centre)) / (scale * scale);
  if (!(curvature < 0) || !Number.isFinite(curvature)) return null;
  const slope = (right - left) / (2 * scale);
  const mean = middle - slope / curvature;
  return { mean, variance: -1 / curvature, peak: centre - (slope * slope) / (2 * curvature) };
}

const SCAN = 64;
const CELLS = 100;
/** Below the peak by this much in ln nothing counts. */
const NEGLIGIBLE = 30;
const MOST_ZOOMS = 40;

/**
 * Any other predictive: its log is scanned over the range, the range fitted to where it counts, and
 * the density taken at equal steps h of a reading with noise h.
 */
function tabulated(
  ln: (y: number, sd: number) => number,
  { sd, range }: { sd: number; range: Range },
): Predictive | null {
  const { period } = range;
  const support =
    period === undefined ? supportOf((y) => ln(y, sd), range) : ([0, period] as const);
  if (support === null) return null;
  const [lower, upper] = support;
  const step = Math.min((upper - lower) / CELLS, sd / 2);
  const cells = Math.min(Math.ceil((upper - lower) / step), 3 * CELLS);
  const h = (upper - lower) / cells;
  const own = Math.min(h, sd);
  // On a circle the last point would be the first again.
  const count = period === undefined ? cells + 1 : cells;
  const points = Array.from({ length: count }, (_, i) => lower + i * h);
  const logs = filled(count, (i) => ln(points[i]!, own));
  const most = Math.max(...logs);
  if (most === -Infinity) return null;
  const masses = Array.from(logs, (log) => Math.exp(log - most));
  const total = masses.reduce((sum, mass) => sum + mass, 0);
  // Kernels of sd h in place of points: they and the reading's noise are the floor.
  const components = points
    .map((mean, i) => ({ weight: masses[i]! / total, mean, variance: h * h }))
    .filter(({ weight }) => weight > 1e-14);
  const mean = components.reduce((sum, one) => sum + one.weight * one.mean, 0);
  const spread = components.reduce((sum, one) => sum + one.weight * (one.mean - mean) ** 2, 0);
  const latent = Math.sqrt(Math.max(spread - own * own, 0));
  return { components, floor: own * own + h * h, mean, sd: latent };
}

/** Where the density counts, or null where it is zero all over the range. */
function supportOf(ln: (y: number) => number, { middle, scale }: Range): [number, number] | null {
  let [lower, upper] = [middle - 8 * scale, middle + 8 * scale];
  for (let zoom = 0; zoom < MOST_ZOOMS; zoom += 1) {
    const step = (upper - lower) / SCAN;
    const logs = filled(SCAN + 1, (i) => ln(lower + i * step));
    const most = Math.max(...logs);
    if (most === -Infinity) return null;
    const counts = Array.from(logs, (log) => log > most - NEGLIGIBLE);
    const first = counts.indexOf(true);
    const last = counts.lastIndexOf(true);
    const [from, to] = [first - 1, last + 1];
    const [below, above] = [lower + from * step, lower + to * step];
    // At an end that still counts there is more outside.
    const whole = first > 0 && last < SCAN;
    if (whole && last - first > SCAN / 4) return [below, above];
    if (whole) [lower, upper] = [below, above];
    else
      [lower, upper] = [
        below - (first === 0 ? 8 : 0) * step,
        above + (last === SCAN ? 8 : 0) * step,
      ];
  }
  return [lower, upper];
}
