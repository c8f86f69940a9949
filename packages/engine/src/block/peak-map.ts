import { logSumExp } from "@weighhouse/numerics/log-sum-exp";
import type { Coordinate } from "./coordinates";
import { climb, isSame, lnScaleOf, type Landscape, type Mode } from "./modes";

/** A map of (0, 1)^d onto coordinates. */
export interface CubeMap {
  /** Fills the coordinates. @returns ln of the map's Jacobian */
  place(u: Float64Array, c: Float64Array): number;
}

/** The share of the cube that is laid onto the whole prior: peaks that no climb found are there. */
const PRIOR_SHARE = 0.1;
/** No peak has less than this times the largest one's share, unless it holds next to nothing. */
const LEAST_SHARE = 0.05;
const NOTHING = 25;
const MOST_PEAKS = 8;

/**
 * Lays (0, 1)^d about the peaks that are known, so that what has to be searched isn't the whole
 * prior. Bounded coordinates are opened by a logistic (a logarithm where one side is infinite), and
 * a slice of u_1 goes to each peak's own
 *
 *   y = centre + L t,   t_j = (2 v_j - 1) / sqrt(2 v_j (1 - v_j))
 *
 * with L L' the covariance there and v_1 the place within the slice: each t is Student's with two
 * degrees of freedom, whose tails reach all that the peak's own don't. The last slice goes to the
 * prior itself. Points so laid have the density
 *
 *   q(c) = sum over slices of share x density,   Jacobian 1 / q
 *
 * so that the integral is the same whatever the peaks are like; it is only found faster.
 */
export function mapAboutPeaks(
  lnDensity: (c: Float64Array) => number,
  coordinates: readonly Coordinate[],
  peaks: readonly Mode[],
): CubeMap {
  const size = coordinates.length;
  const opened = openedPeaks(lnDensity, coordinates, peaks);
  const slices = slicesOf(opened);
  const v = new Float64Array(size);
  const y = new Float64Array(size);
  const t = new Float64Array(size);
  const terms = slices.map(() => 0);
  return {
    place: (u, into) => {
      let from = 0;
      let at = 0;
      while (at < slices.length - 1 && u[0]! >= from + slices[at]!.share) {
        from += slices[at]!.share;
        at += 1;
      }
      for (let j = 1; j < size; j += 1) v[j] = u[j]!;
      v[0] = Math.min(Math.max((u[0]! - from) / slices[at]!.share, FIRST), LAST);
      const { mode } = slices[at]!;
      let lnSlope = 0;
      if (mode === null) {
        for (let j = 0; j < size; j += 1) into[j] = coordinates[j]!.quantile(v[j]!);
        for (let j = 0; j < size; j += 1) y[j] = closed(coordinates[j]!, into[j]!);
        for (let j = 0; j < size; j += 1) lnSlope += lnSlopeAt(coordinates[j]!, y[j]!);
      } else {
        placeAbout(mode, v, { t, y });
        for (let j = 0; j < size; j += 1) lnSlope += open(coordinates[j]!, y[j]!, into, j);
      }
      slices.forEach((slice, k) => {
        const ln =
          slice.mode === null
            ? lnPriorAt(coordinates, into)
            : lnStudent(slice.mode, y, t) - slice.lnScale - lnSlope;
        terms[k] = Math.log(slice.share) + (Number.isNaN(ln) ? -Infinity : ln);
      });
      return -logSumExp(terms);
    },
  };
}

/** Places within a slice: its ends would be infinitely far out. */
const FIRST = 2 ** -60;
const LAST = 1 - 2 ** -53;

/** Peaks of the density over the opened coordinates, each once, the highest mass first. */
function openedPeaks(
  lnDensity: (c: Float64Array) => number,
  coordinates: readonly Coordinate[],
  peaks: readonly Mode[],
): Mode[] {
  const size = coordinates.length;
  const c = new Float64Array(size);
  const landscape: Landscape = {
    ln: (y) => {
      let ln = 0;
      for (let j = 0; j < size; j += 1) ln += open(coordinates[j]!, y[j]!, c, j);
      return ln > -Infinity ? ln + lnDensity(c) : -Infinity;
    },
    lower: new Float64Array(size).fill(-Infinity),
    upper: new Float64Array(size).fill(Infinity),
    step: new Float64Array(size).fill(0.5),
  };
  const found: Mode[] = [];
  for (const peak of peaks) {
    const start = Float64Array.from(coordinates, (one, j) => closed(one, insideOf(one, peak, j)));
    const mode = climb(landscape, start);
    if (mode !== null && !found.some((one) => isSame(one, mode))) found.push(mode);
    if (found.length === MOST_PEAKS) break;
  }
  return found;
}

interface Slice {
  /** null: the prior. */
  mode: Mode | null;
  share: number;
  lnScale: number;
}

function slicesOf(modes: readonly Mode[]): Slice[] {
  const whole: Slice = { mode: null, share: 1, lnScale: 0 };
  const scales = modes.map(lnScaleOf);
  const masses = modes.map(({ height }, k) => height + scales[k]!);
  const largest = Math.max(...masses);
  const slices: Slice[] = [];
  modes.forEach((mode, k) => {
    const below = masses[k]! - largest;
    if (!(below > -NOTHING)) return;
    slices.push({ mode, share: Math.max(Math.exp(below), LEAST_SHARE), lnScale: scales[k]! });
  });
  if (slices.length === 0) return [whole];
  let sum = 0;
  for (const { share } of slices) sum += share;
  for (const slice of slices) slice.share *= (1 - PRIOR_SHARE) / sum;
  return [...slices, { ...whole, share: PRIOR_SHARE }];
}

function placeAbout(
  { centre, scale }: Mode,
  v: Float64Array,
  { t, y }: { t: Float64Array; y: Float64Array },
): void {
  const size = centre.length;
  for (let j = 0; j < size; j += 1) t[j] = (2 * v[j]! - 1) / Math.sqrt(2 * v[j]! * (1 - v[j]!));
  for (let i = 0; i < size; i += 1) {
    y[i] = centre[i]!;
    for (let k = 0; k <= i; k += 1) y[i]! += scale[i * size + k]! * t[k]!;
  }
}

/** ln of the product of Student's densities (2 + t^2)^(-3/2) at t = L^-1 (y - centre). */
function lnStudent({ centre, scale }: Mode, y: Float64Array, t: Float64Array): number {
  const size = centre.length;
  let product = 1;
  let ln = 0;
  for (let i = 0; i < size; i += 1) {
    let rest = y[i]! - centre[i]!;
    for (let k = 0; k < i; k += 1) rest -= scale[i * size + k]! * t[k]!;
    t[i] = rest / scale[i * size + i]!;
    product *= 2 + t[i]! * t[i]!;
    if (product > 1e200) {
      ln += Math.log(product);
      product = 1;
    }
  }
  return -1.5 * (ln + Math.log(product));
}

function lnPriorAt(coordinates: readonly Coordinate[], c: Float64Array): number {
  let ln = 0;
  for (let j = 0; j < coordinates.length; j += 1) ln += coordinates[j]!.lnPrior(c[j]!);
  return ln;
}

/** Writes c_j at y. @returns ln dc/dy */
function open(one: Coordinate, y: number, into: Float64Array, j: number): number {
  const { lower, upper } = one;
  if (upper < Infinity) into[j] = lower + (upper - lower) / (1 + Math.exp(-y));
  else into[j] = lower > -Infinity ? lower + Math.exp(y) : y;
  return lnSlopeAt(one, y);
}

function lnSlopeAt({ lower, upper }: Coordinate, y: number): number {
  if (upper < Infinity) {
    const far = Math.abs(y);
    // ln share + ln (1 - share), without cancellation on either side.
    return Math.log(upper - lower) - far - 2 * Math.log1p(Math.exp(-far));
  }
  return lower > -Infinity ? y : 0;
}

/** y at c. */
function closed({ lower, upper }: Coordinate, c: number): number {
  if (upper < Infinity) return Math.log((c - lower) / (upper - c));
  return lower > -Infinity ? Math.log(c - lower) : c;
}

/** The peak's c_j; half a width inside where the peak is at a bound. */
function insideOf({ lower, upper }: Coordinate, { centre, scale }: Mode, j: number): number {
  const size = centre.length;
  const width = Math.hypot(...scale.subarray(j * size, j * size + j + 1));
  const c = centre[j]!;
  if (upper < Infinity) {
    const margin = Math.min(width / 2, (upper - lower) / 4);
    return Math.min(Math.max(c, lower + margin), upper - margin);
  }
  return lower > -Infinity ? lower + Math.max(c - lower, width / 2) : c;
}
