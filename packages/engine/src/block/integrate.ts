import type { CubeMode, CubeOptions } from "@weighhouse/numerics/cube-integral";
import { integrateUnitCube } from "@weighhouse/numerics/log-integral";
import { LN_SQRT_2PI, normalCdf, truncatedNormalQuantile } from "@weighhouse/numerics/normal";
import type { Axis, Coordinate } from "./coordinates";
import type { Mode } from "./modes";
import { mapAboutPeaks, type CubeMap } from "./peak-map";
import { createSummits } from "./summits";

export interface Integral {
  ln: number;
  error: number;
  /** n points, each an array of coordinates, and their posterior weights, which add up to 1. */
  points: Float64Array[];
  weights: Float64Array;
  /** Up to three dimensions: the posterior probability that one coordinate is at most c. */
  cdf: ((axis: number, c: number) => number) | null;
}

export interface IntegralOptions {
  /** Coordinates; those where the density is 0 lead nowhere. */
  starts: readonly Float64Array[];
  seed: number;
  /** How many kinks the density may have that no `breaks` tell of. */
  kinks?: number;
  /** Whether its kinks lie across the axes. */
  rough?: boolean;
  /** More starts, should there be many peaks; looked at only where the integral is sampled. */
  more?: () => readonly Float64Array[];
  /** What is done, and how much of it a rule in up to three dimensions, then sampling may take. */
  work?: Work;
}

export interface Work {
  done: () => number;
  rule: number;
  sampling: number;
}

const UNBOUNDED: Work = { done: () => 0, rule: Infinity, sampling: Infinity };

/** Thousands of small kinks can't each be found, nor do they have to be. */
function relativeOnLine(kinks: number, rough: boolean): number {
  return rough ? 1e-9 : Math.min(Math.max(1e-11, kinks * 1e-13), 1e-9);
}

/** So many widths about every peak have to be well inside of an axis. */
const MARGIN = 9;
/**
 * An infinite axis is laid out about the highest peak so that the others, and the prior's middle,
 * are within this many standard deviations: further out (0, 1) runs out of numbers.
 */
const REACH = 5;
/** The integral over a peak is known from its width but for less than this in ln. */
const ROUGHLY = 3;
/** Up to so many dimensions there are rules that need no map about the peak. */
const FEW = 3;

/**
 * ln of the integral of exp(lnDensity) over the coordinates, priors included in it.
 *
 * Peaks are climbed to from the starts and handed to the integrator. Infinite axes are laid onto
 * (0, 1) by a normal distribution wide enough for the peaks, whatever their priors. Sampling goes
 * about the peaks where these are all that there are, as far as climbs can tell.
 */
export function integrate(
  lnDensity: (c: Float64Array) => number,
  coordinates: readonly Coordinate[],
  { starts, more, seed, kinks = 0, rough = false, work = UNBOUNDED }: IntegralOptions,
): Integral {
  const size = coordinates.length;
  const summits = createSummits(lnDensity, coordinates);
  summits.climbFrom(starts);
  const byRule = () => {
    const modes = summits.highest();
    const axes = coordinates.map((one, j) => axisOf(one, modes, j));
    const breaks = coordinates.map((one, j) => {
      const places = one.breaks.map((at) => axes[j]!.toUnit(at)).filter((u) => u > 0 && u < 1);
      return [...new Set(places)].sort((a, b) => a - b);
    });
    const relative = size === 1 ? relativeOnLine(kinks, rough) : rough ? 1e-6 : undefined;
    const cubeModes = modes.map((mode) => cubeMode(mode, axes));
    const most = work.done() + work.rule;
    const mayGoOn = () => work.done() < most;
    const options = { size, seed, modes: cubeModes, breaks, relative, mayGoOn };
    const found = overCube(lnDensity, mapByAxes(axes), options);
    const { cdf } = found;
    return {
      ...found,
      cdf: cdf && ((axis: number, at: number) => cdf(axis, axes[axis]!.toUnit(at))),
    };
  };
  const bySampling = () => {
    const before = work.done();
    if (more !== undefined) summits.climbFrom(more());
    const modes = summits.highest();
    const about = summits.areAllKnown() ? mapAboutPeaks(lnDensity, coordinates, modes) : null;
    const byAxes = () => mapByAxes(coordinates.map((one, j) => axisOf(one, modes, j)));
    const spent =
      work.sampling < Infinity ? () => (work.done() - before) / work.sampling : undefined;
    // Sampling begins at four dimensions: those that are over change nothing.
    const spare = Math.max(FEW + 1 - size, 0);
    const found = overCube(lnDensity, about ?? byAxes(), { size, seed, spare, spent });
    // What the peaks that are known hold, as if they were normal, has to be in it.
    const missed = summits.lnMass() - found.ln;
    return missed > ROUGHLY ? { ...found, error: Math.hypot(found.error, missed) } : found;
  };
  if (size > FEW) return bySampling();
  try {
    return byRule();
  } catch (error) {
    if (!(error instanceof WorkSpent)) throw error;
    return bySampling();
  }
}

/** Thrown through the integrator when a rule that doesn't converge has had its share of the work. */
class WorkSpent extends Error {}

function mapByAxes(axes: readonly Axis[]): CubeMap {
  return {
    place: (u, c) => {
      let ln = 0;
      for (let j = 0; j < axes.length; j += 1) ln += axes[j]!.place(u[j]!, c, j);
      return ln;
    },
  };
}

function overCube(
  lnDensity: (c: Float64Array) => number,
  map: CubeMap,
  {
    size,
    spare = 0,
    mayGoOn = () => true,
    ...options
  }: CubeOptions & { size: number; spare?: number; mayGoOn?: () => boolean },
): Integral {
  const c = new Float64Array(size);
  const onCube = (u: Float64Array) => {
    if (!mayGoOn()) throw new WorkSpent();
    const ln = map.place(u, c);
    return ln > -Infinity ? ln + lnDensity(c) : -Infinity;
  };
  const { ln, error, nodes, cdf } = integrateUnitCube(onCube, size + spare, options);
  const whole = size + spare;
  return {
    ln,
    error,
    points: Array.from(nodes.lnWeights, (_, n) => {
      const point = new Float64Array(size);
      map.place(nodes.points.subarray(n * whole, n * whole + size), point);
      return point;
    }),
    weights: Float64Array.from(nodes.lnWeights, Math.exp),
    cdf: cdf ?? null,
  };
}

function axisOf({ lower, upper }: Coordinate, modes: readonly Mode[], j: number): Axis {
  if (lower > -Infinity && upper < Infinity) {
    const width = upper - lower;
    const ln = Math.log(width);
    return {
      place: (u, into, at) => {
        into[at] = lower + u * width;
        return ln;
      },
      toUnit: (c) => (c - lower) / width,
    };
  }
  const half = lower > -Infinity;
  const origin = half ? lower : (modes[0]?.centre[j] ?? 0);
  let spread = Math.max(1, Math.abs(origin) / REACH);
  for (const mode of modes) {
    const distance = Math.abs(mode.centre[j]! - origin) + MARGIN * widthOf(mode, j);
    spread = Math.max(spread, distance / REACH);
  }
  // The share of the normal that the bounds keep: all, or the upper half from 0 on.
  const lnScale = Math.log(spread) + LN_SQRT_2PI - (half ? Math.LN2 : 0);
  return {
    place: (u, into, at) => {
      const z = truncatedNormalQuantile(half ? 0 : -Infinity, Infinity, u);
      into[at] = origin + spread * z;
      return (z * z) / 2 + lnScale;
    },
    toUnit: (c) => {
      const p = normalCdf((c - origin) / spread);
      return half ? 2 * p - 1 : p;
    },
  };
}

function widthOf({ scale, centre }: Mode, j: number): number {
  const size = centre.length;
  return Math.hypot(...scale.subarray(j * size, j * size + j + 1));
}

/** A peak in units of the cube, its widths scaled by du/dc there. */
function cubeMode({ centre, scale }: Mode, axes: readonly Axis[]): CubeMode {
  const size = centre.length;
  const units = Float64Array.from(axes, (axis, j) => axis.toUnit(centre[j]!));
  const placed = new Float64Array(size);
  const shrunk = Float64Array.from(scale, (value, n) => {
    const i = Math.floor(n / size);
    const u = Math.min(Math.max(units[i]!, 1e-300), 1 - 1e-16);
    return value * Math.exp(-axes[i]!.place(u, placed, i));
  });
  return { centre: units, scale: shrunk };
}
